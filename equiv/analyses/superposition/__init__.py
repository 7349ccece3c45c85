"""Superposition: terms, their sub-circuits, powers and paths."""
