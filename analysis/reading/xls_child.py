"""What a separate process does with an .xls file: it hands back the values of every sheet, or dies of a hostile one alone.

Run as a script with the file on standard input; it imports nothing of this package. The workbook library trusts the sizes and
chains that an .xls file names, and a wrong one can take all memory; here the limit ends the process and nothing else.
"""

import io
import pickle
import sys

import python_calamine as calamine

try:
    import resource
except ImportError:  # Windows has no such limits; the time limit of the parent holds there
    resource = None  # type: ignore[assignment]

MEMORY = 3 * 2**30  # bytes of address space; the widest sheet of the format needs less than half


def main() -> None:
    """Read standard input, write one pickled list: name, whether shown, values and merged ranges of each sheet."""
    if resource is not None:
        resource.setrlimit(resource.RLIMIT_AS, (MEMORY, MEMORY))
    book = calamine.CalamineWorkbook.from_filelike(io.BytesIO(sys.stdin.buffer.read()))
    sheets = []
    for about in book.sheets_metadata:
        if about.typ == calamine.SheetTypeEnum.WorkSheet:
            sheet = book.get_sheet_by_name(about.name)
            shown = about.visible == calamine.SheetVisibleEnum.Visible
            sheets.append((about.name, shown, sheet.to_python(skip_empty_area=False), list(sheet.merged_cell_ranges or [])))
    sys.stdout.buffer.write(pickle.dumps(sheets, protocol=pickle.HIGHEST_PROTOCOL))


if __name__ == "__main__":
    main()
