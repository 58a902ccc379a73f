"""Reference data and check values, with where each comes from."""

from pullback.datasets.load import Dataset, load, names

__all__ = ["Dataset", "load", "names"]
