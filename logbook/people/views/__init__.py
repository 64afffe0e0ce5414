"""The room's pages: the door, the people, the shop."""
