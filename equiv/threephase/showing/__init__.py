"""What a fault calculation shows: its words, tables, JSON and CSV."""
