"""Products: what is written from a spectrum, each a plugin of its own."""
