"""Saved workbooks: read, recalculated and written, with no knowledge of sections."""
