"""Formulas as data: read them, lay layers over them, compile them once, run them on numbers or columns."""
