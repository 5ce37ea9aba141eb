"""How the three sample experiments were made: invented means, seeded noise, and the untidiness of real files.

Run `python sample_data/make_samples.py` in an environment that holds the pins; the same cells come out every time.
"""

import csv
import datetime
import itertools
from collections.abc import Iterable, Sequence
from pathlib import Path

import numpy as np
import openpyxl
from openpyxl.styles import Font

HERE = Path(__file__).resolve().parent
Row = Sequence[str | int]

LIGHTS = ("Full sun", "Half shade", "Deep shade")
FEEDS = ("No feed", "Feed A", "Feed B", "Feed A+B")
BASIL_MEANS = ((24.0, 31.0, 33.0, 42.0), (21.5, 25.0, 25.5, 29.5), (14.5, 14.8, 14.2, 15.0))  # g, by light and feed
BASIL_SD = 2.0  # g, between pots of one treatment
POTS = 6

PRIMERS = {"Zinc epoxy": 1.4, "Silane": 0.1, "Acrylic": -1.5}  # MPa from the grand mean
CURES = {60: -1.5, 80: -0.2, 100: 0.7, 120: 1.0}  # MPa from the grand mean, by °C
DAYS = {"Day 1": 0.4, "Day 2": -0.5, "Day 3": 0.1, "Day 4": 0.6, "Day 5": -0.6}  # MPa from the grand mean
COATING_MEAN, COATING_SD = 8.3, 0.5  # MPa
LOST_PANELS = (7, 20, 33, 34, 52)  # dropped or bent before the pull-off
UNREADABLE = {15: "n.d.", 41: "", 58: "n.d."}  # the glue let go, not the coating

STRAINS = ("Y-12", "Y-31", "Y-47")
SUGARS = ("Glucose", "Sucrose", "Maltose")
YEAST_MEANS = ((62.0, 58.5, 51.0), (55.0, 54.0, 47.5), (60.5, 57.0, 19.0))  # mL CO2, by strain and sugar
YEAST_SD = 3.2  # mL
FLASKS = 5
MISTYPED = {11: "maltose ", 13: "Maltos", 28: "maltose "}  # by flask
WORKBOOK_DATE = datetime.datetime(2024, 5, 17, 9, 0)


def basil() -> list[Row]:
    """Return header and rows of a balanced greenhouse trial in which feeding pays with light."""
    random = np.random.default_rng(20240408)
    benches = random.permutation(len(LIGHTS) * len(FEEDS) * POTS) + 1
    rows: list[Row] = [("pot", "bench position", "light", "feed", "yield (g)")]
    for (i, light), (j, feed), _ in itertools.product(enumerate(LIGHTS), enumerate(FEEDS), range(POTS)):
        pot = len(rows)
        grams = random.normal(BASIL_MEANS[i][j], BASIL_SD)
        rows.append((pot, int(benches[pot - 1]), light, feed, f"{grams:.1f}"))
    return rows


def coating() -> list[Row]:
    """Return header and rows of a coating trial in blocks, with lost panels and unreadable values."""
    random = np.random.default_rng(20240502)
    rows: list[Row] = [("panel", "spray day", "primer", "cure temperature (°C)", "adhesion (MPa)")]
    for panel, (day, primer, cure) in enumerate(itertools.product(DAYS, PRIMERS, CURES), start=1):
        mpa = random.normal(COATING_MEAN + DAYS[day] + PRIMERS[primer] + CURES[cure], COATING_SD)
        if panel not in LOST_PANELS:
            rows.append((f"P{panel:02d}", day, primer, cure, UNREADABLE.get(panel, f"{mpa:.2f}")))
    return rows


def yeast() -> list[Row]:
    """Return the rows of a laboratory's sheet: titles, a remark, decimal commas as text, slips of the keyboard, a mean row."""
    random = np.random.default_rng(20240517)
    rows: list[Row] = [
        ("Fermentation trial 7",),
        ("Teaching laboratory, week 20",),
        ("Gas read on the burette at 20 °C; flask 23 was restarted after an hour",),
        (),
        ("Flask", "Strain", "Sugar", "CO2 after 24 h (mL)", "Read by"),
    ]
    gas = []
    for flask, ((i, strain), (j, sugar), _) in enumerate(itertools.product(enumerate(STRAINS), enumerate(SUGARS), range(FLASKS)), start=1):
        gas.append(round(float(random.normal(YEAST_MEANS[i][j], YEAST_SD)), 1))
        rows.append((flask, strain, MISTYPED.get(flask, sugar), with_comma(gas[-1]), "AK" if flask % 2 else "MO"))
    rows.append(("Mean", "", "", with_comma(sum(gas) / len(gas)), ""))
    return rows


NOTES: tuple[Row, ...] = (
    ("Notes",),
    ("Medium: 50 g/L sugar, 2 g/L yeast extract; 100 mL in each flask.",),
    ("Strain Y-47 came from the collection in March and had been kept on glucose.",),
)


def with_comma(number: float) -> str:
    """Return a number with one decimal as a spreadsheet in most of Europe shows it."""
    return f"{number:.1f}".replace(".", ",")


def write_csv(name: str, rows: Iterable[Row]) -> None:
    """Write rows as UTF-8 text separated by commas."""
    with (HERE / name).open("w", newline="", encoding="utf-8") as file:
        csv.writer(file, lineterminator="\n").writerows(rows)


def write_workbook(name: str, rows: Iterable[Row], notes: Iterable[Row]) -> None:
    """Write a workbook with the rows on one sheet and the notes on another."""
    book = openpyxl.Workbook()
    book.properties.creator, book.properties.created, book.properties.modified = "Sample", WORKBOOK_DATE, WORKBOOK_DATE
    trial = book.active
    trial.title = "Trial 7"
    for row in rows:
        trial.append(list(row))
    trial["A1"].font = Font(bold=True, size=14)
    remarks = book.create_sheet("Notes")
    for row in notes:
        remarks.append(list(row))
    book.save(HERE / name)


def main() -> None:
    """Write the three files."""
    write_csv("basil_light_feed.csv", basil())
    write_csv("coating_primer_cure.csv", coating())
    write_workbook("yeast_sugar.xlsx", yeast(), NOTES)


if __name__ == "__main__":
    main()
