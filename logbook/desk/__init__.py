"""Pages and commands that look across rooms."""
