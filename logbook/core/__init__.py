"""Pieces that know no feature."""
