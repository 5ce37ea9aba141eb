"""The words of Bring: what may be brought, what is being read, how the reader's decisions are changed, and which studies are kept."""

from analysis.counted import Account
from analysis.reading import limits
from analysis.rounding import fixed
from app import keeping, words
from app.keeping import Earlier

DROP = "Drop a file here or browse for one"
DROP_HELP = "A table (csv, tsv, txt, xlsx, xls, ods, Parquet), or a study saved at Tell (.crossgrain)."
KEPT = "Nothing leaves this machine. What you open is kept in a folder of your own until you forget it here, the latest 20 studies."
AS_IT_STANDS, AS_UNDERSTOOD = "The file as it stands", "As understood"
DECIDED = "What was decided, and what it could be instead"
ALSO = "Also seen on the way"
FOLLOWED = "What followed from reading it so"
EARLIER, OPEN_AGAIN, FORGET = "Earlier studies on this machine", "Open", "Forget"
ON = "Lay out the design"
COMING_BACK = "Opening the study again …"
BUSY_FROM = 5_000_000  # bytes, from which a file is told with its size while it is read


def file_limit(megabytes: int) -> str:
    """Return how large a file may be."""
    return (
        f"Up to {megabytes} MB, {fixed(limits.ROWS, 0)} rows and {fixed(limits.COLUMNS, 0)} columns; a workbook may unpack to "
        f"{limits.UNPACKED_BYTES // 2**20} MB. Up to {limits.FILE_BYTES // 2**30} GB is read from a shell: python -m analysis."
    )


def reading(name: str, size: int) -> str:
    """Return what is told while a file is read."""
    return f"Reading {name} …" if size < BUSY_FROM else f"Reading {name}, {size / 1e6:.0f} MB: a few seconds for each 50 MB …"


def earlier(one: Earlier) -> str:
    """Return an earlier study as it is offered: its file, its factors, and how long ago it was open."""
    factors = f", {' by '.join(one.factors)}" if one.factors else ""
    return f"{one.name}{factors}, {_ago(one.when)}"


def more_earlier(count: int) -> str:
    """Return what is behind the studies that are offered at once."""
    return f"{fixed(count, 0)} more"


def _ago(when: float) -> str:
    ago = keeping.ago(when)
    for unit, singular in (("days", "day"), ("hours", "hour"), ("minutes", "minute")):
        if ago[unit]:
            return f"{words.counted(ago[unit], singular)} ago"
    return "just now"


def unkept(why: str) -> str:
    """Return that a study could not be written down."""
    return f"This study could not be kept on this machine ({why}): save it at Tell before you close the window."


def reckoning_open(account: Account) -> str:
    """Return the account while the columns have no roles yet."""
    return f"{words.counted(account.whole, 'row')} in the file; which are analysed follows once the columns have their roles."
