"""One module a kind of measurement, found by walking this folder."""
