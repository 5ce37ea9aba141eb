"""How a file, its bytes or a frame become a table, with an account of every row and every decision."""
