"""The demo: an invented ferry and pump-station workshop, told in fixtures/demo/shop and played through the rooms' services."""
