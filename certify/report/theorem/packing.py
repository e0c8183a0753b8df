"""Long lists of numbers as text, as Packed.v of the kernel unpacks them.

Coq takes long to read a list of numbers; of a text of about one character a number it
takes a few seconds a megabyte. Nothing depends on this being right but that a theorem is proved.
"""

from __future__ import annotations

from collections.abc import Iterator, Sequence

_END, _COPY = "@", "~"
_FEW = 61
_RUN = 3
"""So many numbers in a row have to be the same for a copy to be looked for."""
_MOST_PLACES = 16
"""At so many places, the last ones, it is looked whether more of them are the same."""
_LINE = 100
_LITERAL = 4000
"""Characters in one text: Coq takes time and room for a text by more than its length."""


def pack_lists(lists: Sequence[Sequence[int]]) -> str:
    """Pack lists of positive numbers.

    A part of an earlier list is a copy: how many lists back, from which place, how
    many numbers, and a mark. Cost: linear, about a microsecond a number.
    """
    places: dict[tuple[int, ...], list[tuple[int, int]]] = {}
    packed: list[str] = []
    for at, numbers in enumerate(lists):
        packed += _pack(numbers, at, lists, places)
        packed.append(_END)
        for k in range(len(numbers) - _RUN + 1):
            known = places.setdefault(tuple(numbers[k : k + _RUN]), [])
            known.append((at, k))
            del known[:-_MOST_PLACES]
    return "".join(packed)


def write_texts(text: str) -> str:
    """Return a packed text as a term of Coq: a list of literals."""
    parts = [text[i : i + _LITERAL] for i in range(0, len(text), _LITERAL)]
    literals = [
        "\n".join(part[i : i + _LINE] for i in range(0, len(part), _LINE)).replace('"', '""')
        for part in parts
    ]
    return "[" + ";\n".join(f'"{literal}"' for literal in literals) + "]%text"


def _pack(
    numbers: Sequence[int],
    at: int,
    lists: Sequence[Sequence[int]],
    places: dict[tuple[int, ...], list[tuple[int, int]]],
) -> Iterator[str]:
    i = 0
    while i < len(numbers):
        best, taken, gain = _digits(numbers[i]), 1, 0
        for j, k in places.get(tuple(numbers[i : i + _RUN]), ()):
            same = _count_same(numbers, i, lists[j], k)
            text = _digits(at - j) + _digits(k + 1) + _digits(same) + _COPY
            saved = sum(len(_digits(x)) for x in numbers[i : i + same]) - len(text)
            if saved > gain:
                best, taken, gain = text, same, saved
        yield best
        i += taken


def _count_same(numbers: Sequence[int], i: int, others: Sequence[int], k: int) -> int:
    """Return how many numbers are the same from the two places on."""
    same = 0
    while (
        i + same < len(numbers) and k + same < len(others) and numbers[i + same] == others[k + same]
    ):
        same += 1
    return same


def _digits(number: int) -> str:
    """Return a number: one character, or one for its first bits and one for each five more."""
    if number <= _FEW:
        return chr(64 + number)
    return _digits(number >> 5) + chr(32 + (number & 31))
