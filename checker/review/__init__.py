"""Comparing the declared with the recomputed, finding causes, judging by rules, numbering what was found."""
