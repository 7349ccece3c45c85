"""The three-phase file: text into a one-line diagram, and back into text."""
