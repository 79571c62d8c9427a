"""Pure formulas in SI units, one subject a file."""
