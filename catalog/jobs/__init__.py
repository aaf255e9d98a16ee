"""Worked jobs that ship with the package."""
