"""Draws and seals a sheet that it is handed as plain data; knows no engine."""
