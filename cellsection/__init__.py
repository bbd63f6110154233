"""Verified section functions for calc workbooks, and a headless recalculation that checks them."""

__version__ = "0.1.0"
