"""Matching: the loads that suit a port, and the networks that make a load suit it."""
