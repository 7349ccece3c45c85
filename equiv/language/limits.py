"""The bounds of what is read, so that no text can make a reader hang or swell."""

from __future__ import annotations

MOST_BYTES = 256 * 2**20
"""Bytes of a file, and of all the files of a network together."""
MOST_FILES = 1_000
MOST_LINE = 20_000
"""Characters of a line, and of a statement with its continuations."""
MOST_NAME = 255
MOST_TEXT = 2_000
"""Characters of a title, note, label or comment."""
MOST_DIGITS = 1_000
MOST_EXPONENT = 300
"""Numbers lie between 1e-300 and 1e300 in SI units, or are zero."""
MOST_EXPRESSION = 2_000
MOST_DEPTH = 50
"""Parentheses and powers inside each other in an expression."""
MOST_BITS = 2_048
"""Of the numerator and of the denominator of anything an expression comes to."""
MOST_NESTING = 32
"""Blocks inside blocks, and files that read files."""
MOST_ELEMENTS = 2_000_000
"""Elements and instances that come out of blocks."""
MOST_ERRORS = 200
