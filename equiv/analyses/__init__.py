"""One module an analysis: its function, its frozen result, its tables."""
