"""How large a file may be that is read: bytes, rows, columns, levels, what a workbook unpacks to, and what one cell holds."""

FILE_BYTES = 2**30  # of a file as it lies on the disk
ROWS = 20_000_000  # of a text or Parquet file
COLUMNS = 1_000
UNPACKED_BYTES = 512 * 2**20  # of all parts of a workbook together
SHEET_CELLS = 20_000_000  # of the rectangle that the filled cells of a sheet span
CELL_CHARACTERS = 32_767  # the most that a spreadsheet holds in a cell
COMBINATIONS = 40_000  # levels of one factor times levels of the other
LEVELS = COMBINATIONS // 2  # of one factor, the other having two
