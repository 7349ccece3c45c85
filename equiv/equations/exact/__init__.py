"""Exact arithmetic: rational numbers, and complex ones with rational parts."""
