"""Benchmarks: ratios of our own work to a plain yardstick, both measured side by side in one run."""
