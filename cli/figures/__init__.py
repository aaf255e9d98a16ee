"""Figures: one module a question; every `plot` draws on axes that it is given, or makes its own, and returns them."""
