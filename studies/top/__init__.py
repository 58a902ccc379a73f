"""From pull tests of stretched rubber parts to the load that such a part carries, and how sure that is."""

from importlib.metadata import version

__version__ = version("pullback")
