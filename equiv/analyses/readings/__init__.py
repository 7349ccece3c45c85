"""Finding a port from its readings."""
