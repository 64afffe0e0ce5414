"""The people of a shop."""
