"""Formulas: the equations of a network solved in the symbols of its elements and in s."""
