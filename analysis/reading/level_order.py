"""The natural order of levels: numbers by value, months and ordered words by meaning, the rest as the file shows them."""

import re
from collections.abc import Mapping, Sequence

_SCALES: tuple[tuple[str, ...], ...] = (  # words between commas share a rank
    ("false", "true"),
    (
        "none,zero,nil,absent,no",
        "extremely low",
        "very low",
        "low",
        "medium low,moderately low",
        "medium,moderate,mid,middle,intermediate,med,average,normal",
        "medium high,moderately high",
        "high",
        "very high",
        "extremely high",
    ),
    (
        "none,zero",
        "extra small,xs",
        "very small",
        "small,s",
        "medium,mid,m,intermediate",
        "large,l,big",
        "very large,very big",
        "extra large,xl",
        "xxl",
    ),
    ("none,no", "very weak", "weak", "moderate,medium,intermediate", "strong", "very strong"),
    ("none,no,absent", "very mild", "mild,slight", "moderate,medium", "severe", "very severe"),
    ("none", "very short", "short", "medium,intermediate,middle", "long", "very long", "tall", "very tall"),
    ("none", "very light", "light", "medium,moderate", "heavy", "very heavy"),
    ("very slow", "slow", "medium,moderate,intermediate", "fast", "very fast"),
    ("very early", "early", "mid,middle,medium,intermediate", "late", "very late"),
    ("none", "quarter", "third", "half", "two thirds", "three quarters", "full"),
    ("very cold", "cold", "cool", "mild,medium", "warm", "hot", "very hot"),
    ("very dry", "dry", "moist,medium,intermediate", "wet", "very wet"),
    ("young", "middle,middle-aged,middle aged", "old"),
    ("juvenile", "adult"),
    ("before", "during", "after"),
    ("pre", "mid", "post"),
    ("never", "rarely", "sometimes", "often", "always"),
    ("poor", "fair", "good", "very good", "excellent"),
    ("shallow", "medium,intermediate,middle", "deep"),
    ("bottom", "middle,mid,centre,center", "top"),
    ("minimum,min", "medium,mid", "maximum,max"),
    ("first", "second", "third", "fourth", "fifth", "sixth", "seventh", "eighth", "ninth", "tenth"),
    ("dawn", "morning", "noon,midday", "afternoon", "evening", "night", "midnight"),
    ("monday,mon", "tuesday,tue,tues", "wednesday,wed", "thursday,thu,thur,thurs", "friday,fri", "saturday,sat", "sunday,sun"),
    (
        *("january,jan", "february,feb", "march,mar", "april,apr", "may", "june,jun", "july,jul", "august,aug"),
        *("september,sep,sept", "october,oct", "november,nov", "december,dec"),
    ),
)
_RANKS: tuple[Mapping[str, int], ...] = tuple(
    {word: rank for rank, words in enumerate(scale) for word in words.split(",")} for scale in _SCALES
)
_ZERO_WORDS = frozenset(["none", "zero", "control", "ctrl", "untreated", "check", "blank", "placebo", "unfertilised", "unfertilized", "0"])
_CHUNK = re.compile(r"([0-9]+(?:[.,][0-9]+)?)")
_BELOW = re.compile(r"^(<|≤|under |below |up to )", re.IGNORECASE)

Key = tuple[tuple[int, float, str], ...]


def by_words(labels: Sequence[str]) -> list[int] | None:
    """Return the order of labels that are months, weekdays or words of one ordered scale, or None where they are not."""
    folded = [re.sub(r"[ _-]+", " ", label.casefold()).strip(" .") for label in labels]
    for ranks in _RANKS:
        if all(word in ranks for word in folded):
            return sorted(range(len(labels)), key=lambda index: ranks[folded[index]])
    return None


def by_carried_numbers(labels: Sequence[str]) -> list[int] | None:
    """Return the order of labels that all carry a number (T2, T10, 10 mg), words for nothing or a control first; else None."""
    numbered = [bool(_CHUNK.search(label)) for label in labels]
    zero = [label.casefold() in _ZERO_WORDS for label in labels]
    if not any(numbered) or not all(one or other for one, other in zip(numbered, zero, strict=True)):
        return None
    return sorted(range(len(labels)), key=lambda index: (not zero[index] or numbered[index], _key(labels[index])))


def _key(label: str) -> Key:
    """Text and numbers in turn, each number by its value; “<10” stands before “10”."""
    below = (-1 if _BELOW.match(label) else 0, 0.0, "")
    text = _BELOW.sub("", label).casefold()
    signed = re.fullmatch(r"[-\u2212]([0-9].*)", text)
    chunks = _CHUNK.split(signed[1] if signed else text)
    parts = [(0, 0.0, chunk.strip()) if index % 2 == 0 else (1, float(chunk.replace(",", ".")), "") for index, chunk in enumerate(chunks)]
    if signed:
        parts[1] = (1, -parts[1][1], "")
    return (parts[0], below, *parts[1:])


def natural(labels: Sequence[str]) -> list[int]:
    """Return the natural order of labels that are not all numbers; they come in the order in which the file shows them."""
    return by_words(labels) or by_carried_numbers(labels) or list(range(len(labels)))
