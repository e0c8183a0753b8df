r"""Text for LaTeX: every character that has a meaning there, or that its fonts lack, replaced.

The documents use the standard fonts of LaTeX (encoding OT1), which compile everywhere.
Accented Latin letters are composed; a letter of another script is shown by its
code point, for a wrong letter would be worse.
"""

from __future__ import annotations

import unicodedata
from functools import lru_cache

_SPECIAL = {
    "\\": r"\textbackslash{}",
    "{": r"\{",
    "}": r"\}",
    "$": r"\$",
    "&": r"\&",
    "#": r"\#",
    "%": r"\%",
    "_": r"\_",
    "^": r"\textasciicircum{}",
    "~": r"\textasciitilde{}",
    "<": r"$<$",
    ">": r"$>$",
    "|": r"$|$",
    '"': r"\textquotedbl{}",
    "\xa0": "~",
    "\u2013": "--",
    "\u2014": "---",
    "\u2018": "`",
    "\u2019": "'",
    "\u201c": "``",
    "\u201d": "''",
    "\u2026": r"\dots{}",
    "\u2212": r"$-$",
    "·": r"$\cdot$",
    "\xd7": r"$\times$",
    "±": r"$\pm$",
    "≤": r"$\le$",
    "≥": r"$\ge$",
    "≠": r"$\ne$",
    "≡": r"$\equiv$",
    "∈": r"$\in$",
    "→": r"$\to$",
    "∞": r"$\infty$",
    "²": r"$^2$",
    "³": r"$^3$",
    "°": r"$^\circ$",
    "§": r"\S{}",
    "ß": r"\ss{}",
    "æ": r"\ae{}",
    "Æ": r"\AE{}",
    "ø": r"\o{}",
    "Ø": r"\O{}",
    "œ": r"\oe{}",
    "Œ": r"\OE{}",
    "ł": r"\l{}",
    "Ł": r"\L{}",
    "\u0131": r"\i{}",
}
_ACCENTS = {
    "\u0300": "`",
    "\u0301": "'",
    "\u0302": "^",
    "\u0303": "~",
    "\u0304": "=",
    "\u0306": "u",
    "\u0307": ".",
    "\u0308": '"',
    "\u030a": "r",
    "\u030b": "H",
    "\u030c": "v",
    "\u0327": "c",
}
_GREEK = (
    *("alpha", "beta", "gamma", "delta", "epsilon", "zeta", "eta", "theta", "iota", "kappa"),
    *("lambda", "mu", "nu", "xi", "", "pi", "rho", "varsigma", "sigma", "tau", "upsilon"),
    *("phi", "chi", "psi", "omega"),
)


def escape_tex(text: str) -> str:
    """Return a plain text as LaTeX, of ASCII characters alone. Cost: linear."""
    return "".join(map(_escape, text))


@lru_cache(maxsize=1024)
def _escape(letter: str) -> str:
    if letter in _SPECIAL:
        return _SPECIAL[letter]
    if letter.isascii():
        return letter if letter.isprintable() else " "
    place = ord(letter) - 0x3B1
    if 0 <= place < len(_GREEK) and _GREEK[place]:
        return rf"$\{_GREEK[place]}$"
    parts = unicodedata.normalize("NFD", letter)
    if len(parts) == 2 and parts[0].isascii() and parts[0].isalpha() and parts[1] in _ACCENTS:
        base = {"i": r"\i", "j": r"\j"}.get(parts[0], parts[0])
        return rf"\{_ACCENTS[parts[1]]}{{{base}}}"
    return rf"\texttt{{[U+{ord(letter):04X}]}}"
