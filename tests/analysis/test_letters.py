"""The compact letter display: two means share a letter exactly when they are not different, and no letter can go."""

import numpy as np
import pytest
from numpy.typing import NDArray

from analysis.letters import letters

Pattern = NDArray[np.bool_]


def pattern(k: int, pairs: list[tuple[int, int]]) -> Pattern:
    """Return the matrix in which just these pairs differ."""
    different = np.zeros((k, k), dtype=bool)
    for i, j in pairs:
        different[i, j] = different[j, i] = True
    return different


def letter_sets(found: tuple[str, ...]) -> list[set[str]]:
    """Return the letters of each mean apart; a display that needs more than 26 separates them by spaces."""
    apart = any(" " in text for text in found)
    return [set(text.split(" ")) if apart else set(text) for text in found]


def sharing(sets: list[set[str]]) -> Pattern:
    """Return which means share no letter."""
    return np.array([[not a & b for b in sets] for a in sets])


def random_pattern(generator: np.random.Generator) -> tuple[list[int], Pattern]:
    k = int(generator.integers(1, 15))
    above = np.triu(generator.uniform(size=(k, k)) < generator.uniform(), 1)
    return [int(i) for i in generator.permutation(k)], above | above.T


def test_any_pattern_can_be_read_back() -> None:
    generator = np.random.default_rng(20)
    for _ in range(1000):
        order, different = random_pattern(generator)
        found = letters(order, different)
        sets = letter_sets(found)
        assert all(sets)
        assert np.array_equal(sharing(sets), different)
        assert "a" in sets[order[0]]


def test_no_letter_can_be_left_away() -> None:
    # The sweep of Piepho (2004), J. Comput. Graph. Stat. 13, 456-466: taking any one letter from any mean loses a pair or the
    # mean's last letter.
    generator = np.random.default_rng(21)
    for _ in range(200):
        order, different = random_pattern(generator)
        sets = letter_sets(letters(order, different))
        for mean, own in enumerate(sets):
            for letter in own:
                fewer = [own - {letter} if i == mean else others for i, others in enumerate(sets)]
                assert not fewer[mean] or not np.array_equal(sharing(fewer), different)


def test_overlapping_groups_run_down_the_means() -> None:
    # Common practice: five means, neighbours alike, those further apart different.
    far = [(0, 2), (0, 3), (0, 4), (1, 3), (1, 4), (2, 4)]
    assert letters([0, 1, 2, 3, 4], pattern(5, far)) == ("a", "ab", "bc", "cd", "d")


def test_means_in_any_order_get_letters_from_the_largest() -> None:
    # The third mean is the largest and differs from the first, the smallest.
    assert letters([2, 1, 0], pattern(3, [(0, 2)])) == ("b", "ab", "a")


@pytest.mark.parametrize(("k", "pairs", "expected"), [(1, [], ("a",)), (3, [], ("a", "a", "a")), (2, [(0, 1)], ("a", "b"))])
def test_small_families(k: int, pairs: list[tuple[int, int]], expected: tuple[str, ...]) -> None:
    assert letters(range(k), pattern(k, pairs)) == expected


def test_beyond_z_letters_go_on_and_are_set_apart() -> None:
    found = letters(range(30), ~np.eye(30, dtype=bool))
    assert found[:2] == ("a", "b")
    assert found[25:] == ("z", "aa", "ab", "ac", "ad")
    assert not any(" " in text for text in found)  # one letter each


def test_scattered_differences_do_not_multiply_letters() -> None:
    # Thirty pairs that differ and nothing else: splitting at each pair would make 2^30 columns.
    k = 60
    different = pattern(k, [(i, i + 1) for i in range(0, k, 2)])
    found = letters(range(k), different)
    sets = letter_sets(found)
    assert np.array_equal(sharing(sets), different)
    assert len(set.union(*sets)) <= k
