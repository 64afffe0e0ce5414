"""The pages of this room."""
