"""The sequence networks of a system, joined at a fault and solved."""
