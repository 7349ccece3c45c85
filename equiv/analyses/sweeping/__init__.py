"""Sweeps: axes, points, curves and their pictures."""
