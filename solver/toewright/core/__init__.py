"""Compiled kernels on plain arrays; units and validation stop one layer above."""
