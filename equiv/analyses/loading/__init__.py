"""Loads on a port, and their proof in the original network."""
