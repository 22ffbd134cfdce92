"""Physical terms: each file adds one contribution to the stiffness or to the mass."""
