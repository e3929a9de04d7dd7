"""formcheck: what a recipe will look like, what it breaks, and who decides."""

__version__ = "0.1.0"
