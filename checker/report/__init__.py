"""Renderers: a finished report in, text out; the same facts in every format."""
