"""Points read from and written to files of places."""
