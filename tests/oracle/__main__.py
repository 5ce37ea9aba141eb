"""Write the oracle's answers beside the other reference cases: python -m tests.oracle [name ...]."""

import json
import sys
from pathlib import Path

from tests.oracle.cases import all_cases
from tests.oracle.whole import Case, answer, written

FOLDER = Path(__file__).resolve().parents[1] / "reference" / "oracle"


def stored(case: Case) -> dict[str, object]:
    """A case with its answer, as kept in a file."""
    source = "tests/oracle, exact fractions and 50-digit tails; written by python -m tests.oracle"
    return {"source": source, "choices": case.choices, "rows": case.rows, "answer": written(answer(case))}


def main(names: list[str]) -> None:
    """Write every case, or those named."""
    FOLDER.mkdir(exist_ok=True)
    for case in all_cases():
        if not names or case.name in names:
            text = json.dumps(stored(case), separators=(",", ":"))
            (FOLDER / f"{case.name}.json").write_text(text + "\n", encoding="utf-8")
            print(case.name, flush=True)


if __name__ == "__main__":
    main(sys.argv[1:])
