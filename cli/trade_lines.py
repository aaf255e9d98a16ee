"""Effective widths, plastic bending and the constants of section tables at one place, as lines."""

from __future__ import annotations

from collections.abc import Mapping
from typing import Any

Row = Mapping[str, Any]
Line = tuple[str, str, str, float | None]
"""Symbol, meaning in words, quantity, value in SI units."""


def trade_lines(data: Row) -> list[tuple[str, list[Line]]]:
    """List effective widths, plastic bending and table values by heading; nothing where there is none.

    Parameters
    ----------
    data : mapping
        Results of `fishbelly section`, SI units.
    """
    widths = [entry for part in data["parts"] for entry in _width(part)]
    return [*widths, *_plastic(data.get("plastic")), *_table(data.get("table"))]


def _width(part: Row) -> list[tuple[str, list[Line]]]:
    if "width" not in part:
        return []
    width = part["width"]
    lines: list[Line] = [
        ("b_eff", "effective width, in stiffness and stress", "length", width["effective"]),
        ("b", "given width, in weight", "length", width["given"]),
    ]
    return [(f"Width of {part['name']}, {width['rule']}", lines)]


def _plastic(plastic: Row | None) -> list[tuple[str, list[Line]]]:
    if not plastic:
        return []
    lines: list[Line] = [
        ("W_pl", "section modulus, plastic", "section modulus", plastic["W_pl"]),
        ("M_pl", "plastic moment, without axial force", "moment", plastic["M_pl"]),
    ]
    lines = [line for line in lines if line[3] is not None]
    lines.append(("z_pl", "plastic neutral axis, kept level", "length", plastic["z"]))
    return [("Plastic bending in the vertical plane: plastic, never used in a deflection", lines)]


def _table(table: Row | None) -> list[tuple[str, list[Line]]]:
    if not table:
        return []
    lines: list[Line] = [("I_t", "torsion constant", "second moment", table["I_t"])]
    if table["I_w"] is not None:
        lines.append(("I_w", "warping constant", "warping constant", table["I_w"]))
    return [(f"As section tables print it of {table['part']} (formula: {table['formula']})", lines)]
