"""The coordinate data set on disk: importing it, keeping it, and asking it which studies hit a region."""
