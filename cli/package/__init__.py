"""Bending stiffness EI(x) of members whose cross-section changes or mixes materials, and what they deflect."""

__version__ = "0.1.0"
