"""What formulas are as results: which symbols, which terms, what is told of them."""
