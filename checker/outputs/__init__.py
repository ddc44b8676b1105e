"""Files a report is written to: which ending makes which, and the makers of each."""
