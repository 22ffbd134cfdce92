"""An outside package with one plugin of each kind."""
