"""Measures a declared design: from its outline, bars and links to the numbers the formulas start from."""
