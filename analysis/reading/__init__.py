"""How a file, its bytes or a frame become a table, with an account of every row and every decision."""

from analysis.reading.entry import read_table

__all__ = ["read_table"]
