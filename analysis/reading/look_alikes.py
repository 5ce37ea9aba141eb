"""Which levels may be one level written in several ways: case, inner spaces, one letter, look-alike letters."""

from collections import defaultdict
from collections.abc import Mapping, Sequence
from itertools import combinations

from analysis.reading import numerals
from analysis.table import Levels, counts

_CYRILLIC_AND_GREEK = str.maketrans(
    "АВЕЅІЈКМНОРСТУХавеѕіјкмнорстухΑΒΕΖΗΙΚΜΝΟΡΤΥΧοανικρυχ",
    "ABESIJKMHOPCTYXabesijkmhopctyxABEZHIKMNOPTYXoavikpux",
)
_MOST = 300  # levels compared with each other; more are identifiers rather than levels
_LONGEST = 60  # letters; in longer text one letter is no typing error worth a look
_SHORTEST = 4  # letters; shorter words differ by one letter too easily


def pairs(labels: Sequence[str]) -> tuple[tuple[str, str, str], ...]:
    """Return pairs of levels that look alike, each with what they differ in."""
    if len(labels) > _MOST or all(map(_is_number, labels)):
        return ()
    found = ((labels[i], labels[j], difference(labels[i], labels[j])) for i, j in _near(labels))
    return tuple((left, right, how) for left, right, how in found if how)


def _near(labels: Sequence[str]) -> list[tuple[int, int]]:
    """The places of labels that may look alike: those that share a spelling, or one with a letter left out."""
    sharing: defaultdict[str, list[int]] = defaultdict(list)
    for place, label in enumerate(labels):
        for spelling in _spellings(label):
            sharing[spelling].append(place)
    return sorted({pair for places in sharing.values() for pair in combinations(places, 2)})


def _spellings(label: str) -> set[str]:
    """How a label is spelled without what look-alikes differ in."""
    folded = label.casefold()
    shorter = {folded[:place] + folded[place + 1 :] for place in range(len(folded))} if len(folded) <= _LONGEST else set()
    return {folded, squeezed(label), squeezed(label.translate(_CYRILLIC_AND_GREEK)), *shorter}


def notes(name: str, labels: Sequence[str]) -> tuple[str, ...]:
    """A sentence for each pair of look-alike levels, which offers the merge."""
    return tuple(
        f"Column “{name}”: the levels “{left}” and “{right}” differ only in {how} and were kept apart; merge them if they are one."
        for left, right, how in pairs(labels)
    )


def merges(levels: Levels) -> dict[str, str]:
    """Return, for each level that looks like a commoner one, that one: what a merge would make of it."""
    often = dict(zip(levels.labels, counts(levels.codes, len(levels.labels)).tolist(), strict=True))
    found: dict[str, str] = {}
    for left, right, _ in pairs(levels.labels):
        rarer, commoner = sorted((right, left), key=lambda label: often[label])
        if often.get(found.get(rarer, ""), -1) < often[commoner]:
            found[rarer] = commoner
    return {rarer: _end_of(commoner, found) for rarer, commoner in found.items()}


def _end_of(label: str, found: Mapping[str, str]) -> str:
    """Follow merges of merges to the level that stays."""
    while label in found:
        label = found[label]
    return label


def difference(left: str, right: str) -> str:
    """Return in what two look-alike levels differ ("case", …), or "" where they are simply different."""
    if left.casefold() == right.casefold():
        return "case"
    if squeezed(left) == squeezed(right):
        return "" if _is_number(left) and _is_number(right) else "spaces or hyphens"
    plain_left, plain_right = left.translate(_CYRILLIC_AND_GREEK), right.translate(_CYRILLIC_AND_GREEK)
    if (plain_left, plain_right) != (left, right) and squeezed(plain_left) == squeezed(plain_right):
        return "look-alike letters of two alphabets"
    return "one letter" if one_letter_apart(left.casefold(), right.casefold()) else ""


def _is_number(label: str) -> bool:
    """Whether a label is a number, whose minus sign is no hyphen."""
    return numerals.find(label) is not None


def squeezed(text: str) -> str:
    """Return text without spaces, hyphens and capitals."""
    return text.casefold().replace(" ", "").replace("-", "").replace("_", "")


def one_letter_apart(left: str, right: str) -> bool:
    """Whether one letter more, less, exchanged, or two neighbours swapped turn one word into the other.

    Digits, and letters that stand alone (“line A”, “line B”), tell levels apart on purpose and do not count.
    """
    if min(len(left), len(right)) < _SHORTEST or abs(len(left) - len(right)) > 1:
        return False
    start = next((i for i, (a, b) in enumerate(zip(left, right, strict=False)) if a != b), min(len(left), len(right)))
    end = next((i for i, (a, b) in enumerate(zip(left[::-1], right[::-1], strict=False)) if a != b), min(len(left), len(right)))
    middle_left, middle_right = left[start : max(start, len(left) - end)], right[start : max(start, len(right) - end)]
    if (
        not all(character.isalpha() for character in middle_left + middle_right)
        or _stands_alone(left, start)
        or _stands_alone(right, start)
    ):
        return False
    return max(len(middle_left), len(middle_right)) <= 1 or (len(middle_left) == 2 and middle_left == middle_right[::-1])


def _stands_alone(word: str, place: int) -> bool:
    before, after = word[place - 1 : place] if place else "", word[place + 1 : place + 2]
    return not before.isalpha() and not after.isalpha() and word[place : place + 1].isalpha()
