"""The measuring library: judges what was read on a four-stroke engine. No Django; usable from a plain prompt."""
