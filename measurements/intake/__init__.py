"""Reading the document of `assess`: fields in, engine, shop, limits, gauges and measurements out, every error with its path."""
