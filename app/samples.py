"""The invented experiments that come with the program: their files, and the words of the text beside each."""

from dataclasses import dataclass
from pathlib import Path

FOLDER = Path(__file__).resolve().parent.parent / "sample_data"
TABLES = (".csv", ".xlsx")


@dataclass(frozen=True)
class Sample:
    """One experiment to look around with."""

    file: str  # name of the table in the folder of samples
    question: str  # what the experiment asks
    sentence: str  # what was done


def _told(table: Path) -> Sample:
    """Read the text beside a table: its first line is the question, its second paragraph begins with what was done."""
    question, _, rest = table.with_suffix(".txt").read_text(encoding="utf-8").partition("\n")
    done, full_stop, _ = rest.strip().partition(". ")
    return Sample(table.name, question.strip(), done + full_stop.strip())


SAMPLES = tuple(_told(table) for table in sorted(FOLDER.iterdir()) if table.suffix in TABLES)


def path_of(file: str) -> Path:
    """Return where a sample's table lies."""
    return FOLDER / file


def question_of(file: str) -> str:
    """Return what a sample's experiment asks."""
    return next(sample.question for sample in SAMPLES if sample.file == file)
