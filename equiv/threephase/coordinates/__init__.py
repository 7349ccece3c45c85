"""The second method: the same faults in three conductors, without sequences."""
