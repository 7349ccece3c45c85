"""From a network to its equations and their solution."""
