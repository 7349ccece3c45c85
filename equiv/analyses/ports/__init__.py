"""Ports: what is seen there, equivalents and parameters, and their proofs."""
