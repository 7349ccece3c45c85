"""Three-phase systems: a one-line diagram becomes sequence networks, joined at a fault."""
