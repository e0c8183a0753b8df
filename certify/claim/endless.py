"""What an endless claim says for every value of its growing parameter.

The claimed expression is read like a rule (module `linear`): its conditions speak
of n alone and keep their sign from some n on, so that its truth is periodic there
with the least common multiple of its moduli.
"""

from __future__ import annotations

from collections.abc import Mapping
from math import lcm

from certify.claim.claim import Claim
from certify.claim.hints import shown
from certify.claim.instances import EndlessKey, Row, in_instance, name_key
from certify.claim.language import Expression
from certify.claim.linear import Form, Forms, Reading, constant, read_linear
from certify.claim.periodic import PeriodicSet
from certify.errors import ClaimError, InputError

MAX_START = 500_000
"""From where on, at the latest, the claimed answers have to be periodic."""
MAX_PERIOD = 60
MOST_DIGITS = 100
"""How many digits a number has that is asked for."""


def parameter_forms(claim: Claim, row: Row) -> dict[str, Forms]:
    """Return what the parameters are in a row: constants, but for the growing one."""
    return {
        name: (Form(0, 0, 1, 0, 0),) if name == claim.growing else constant(value)
        for name, value in zip(claim.parameters, row, strict=True)
    }


def with_growing(claim: Claim, row: Row, n: int) -> Row:
    """Return the row with a value for the growing parameter."""
    return tuple(
        n if name == claim.growing else value
        for name, value in zip(claim.parameters, row, strict=True)
    )


def key_of(claim: Claim, row: Row, n: int) -> dict[str, int]:
    """Return the key of the instance for one value of the growing parameter."""
    return dict(zip(claim.parameters, with_growing(claim, row, n), strict=True))


def endless_key(claim: Claim, row: Row) -> EndlessKey:
    """Return the key of a row: {"m": 3, "n": "4.."}."""
    return {
        name: f"{value}.." if name == claim.growing else value
        for name, value in zip(claim.parameters, row, strict=True)
    }


def row_of(claim: Claim, key: Mapping[str, int | str] | int) -> Row:
    """Return the row of an endless instance's key."""
    values = {} if isinstance(key, int) else key
    return tuple(int(str(values[name]).removesuffix("..")) for name in claim.parameters)


def find_row(claim: Claim, name: str) -> tuple[Row, int | None]:
    """Return the row of an instance written `m=3,n=4..`, or `m=3,n=17` for one of its n.

    The second part is that n, None for the whole row.
    Errors: InputError when the claim has no such row, or no such n.
    """
    text = name.replace(" ", "")
    parts = dict(part.partition("=")[::2] for part in text.split(","))
    wanted = parts.get(str(claim.growing), "")
    for row in claim.rows:
        low = first_value(claim, row)
        whole = {key: str(value) for key, value in endless_key(claim, row).items()}
        if parts == whole:
            return row, None
        if parts == whole | {str(claim.growing): wanted} and _is_number(wanted):
            if int(wanted) < low:
                break
            return row, int(wanted)
    example = endless_key(claim, claim.rows[0])
    one = example | {str(claim.growing): first_value(claim, claim.rows[0]) + 100}
    raise InputError(
        f"{claim.where}: there is no instance {shown(name)}; "
        f"write {name_key(example)}, or {name_key(one)} for one of its graphs"
    )


def _is_number(text: str) -> bool:
    return text.removeprefix("-").isdecimal() and text.isascii() and len(text) <= MOST_DIGITS


def first_value(claim: Claim, row: Row) -> int:
    """Return the first value of the growing parameter in a row."""
    return next(v for name, v in zip(claim.parameters, row, strict=True) if name == claim.growing)


def claimed_set(claim: Claim, row: Row) -> PeriodicSet | None:
    """Return for which values of the growing parameter the object is claimed to exist.

    None: nothing is claimed.
    Errors: ClaimError when the claimed expression has no value for some n, or is
    not periodic by its form.
    Cost: one evaluation for each n up to the end of the first period.
    """
    truth = claim.answers.truth
    if truth is None:
        return None
    low = first_value(claim, row)
    if isinstance(truth, bool):
        return PeriodicSet.of(low, (), (truth != claim.answers.inverted,))
    start, period = _read_period(truth, parameter_forms(claim, row))

    def holds(n: int) -> bool:
        return bool(truth.evaluate(with_growing(claim, row, n))) != claim.answers.inverted

    try:
        return PeriodicSet.sample(low, start, period, holds)
    except ClaimError as error:
        raise in_instance(error, endless_key(claim, row)) from None


def _read_period(rule: Expression, names: Mapping[str, Forms]) -> tuple[int, int]:
    """Return from where on the truth is periodic, and with which period."""
    reading = Reading()
    refusal = ("for an endless claim the answers have to be periodic, and ", "")
    read_linear(rule, names, reading, refusal)
    start = max((form.size for form in reading.conditions), default=0) + 1
    period = lcm(*reading.moduli)
    if start > MAX_START or period > MAX_PERIOD:
        raise ClaimError(
            f"{rule.source.where}: the answers of an endless claim have to be periodic from "
            f"{MAX_START:,} on, with a period of at most {MAX_PERIOD:,}"
        )
    return start, period
