"""What to bring: runs to volumes, packages of least cost, and everything that goes with the sealant."""
