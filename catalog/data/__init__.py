"""Data files of the catalogue."""
