"""Logs of building systems and monitors: read as CSV, asked where they can be read two ways."""
