"""Errors of the member: what cannot be computed, and where."""

from __future__ import annotations


class FishbellyError(Exception):
    """Base of every error this package raises on purpose."""


class CannotCompute(FishbellyError, ArithmeticError):
    """The numbers cannot be had; the text says why and where."""


class NoStiffness(CannotCompute):
    """There is no stiffness at a place where force has to pass.

    Parameters
    ----------
    at : float
        The place [m].
    reason : str
        What is missing there.
    """

    def __init__(self, at: float, reason: str) -> None:
        super().__init__(f"no stiffness at x = {at:.6g} m: {reason}")
        self.at = at
        self.reason = reason


class Mechanism(CannotCompute):
    """The member can move without straining.

    Parameters
    ----------
    reason : str
        How it moves and where.
    """

    def __init__(self, reason: str) -> None:
        super().__init__(f"mechanism: {reason}")
        self.reason = reason


class NotLinear(FishbellyError, TypeError):
    """Results of a law that does not add were asked to be added or scaled."""
