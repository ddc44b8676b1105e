"""The page: one self-contained HTML file with its drawings, from a finished report."""
