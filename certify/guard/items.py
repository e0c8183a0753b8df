"""What the pytest plugin tests: the instances of one claim, checked as they are asked for."""

from __future__ import annotations

from collections.abc import Iterator
from pathlib import Path

from certify.claim.claim import Claim, read_claim
from certify.claim.endless import endless_key
from certify.claim.instances import name_key
from certify.claim.parts import FORMATS, GraphList
from certify.errors import ClaimError
from certify.guard.check import FolderGuard, check_lone_claim
from certify.guard.files import read_manifest
from certify.guard.find import MANIFEST, find, is_met
from certify.guard.guard import contents_of, find_copies
from certify.guard.report import ACCEPTED, ALLOWED, Case, Report, one_line, render_trouble


class Subject:
    """A claim, and the folder with its evidence.

    path: the claim file, or a manifest in its place. folder: None without evidence.
    """

    def __init__(self, path: Path, folder: Path | None) -> None:
        self.path = path
        self.shown = one_line(path.parent.name)
        self._guard = None if folder is None else FolderGuard(folder)
        self._coming = iter(()) if self._guard is None else self._guard.cases()
        self._cases: dict[str, Case] = {}
        self._names: list[str] = []

    def names(self) -> Iterator[str]:
        """Yield the instances; none of a claim that cannot be read, which fails as a whole."""
        path = self.path if self._guard is None else self._guard.claim
        try:
            self._names = list(_list_names(read_claim(path), path.parent))
        except (ClaimError, OSError):
            self._names = []
        yield from self._names

    def look_up(self, name: str) -> tuple[str, str]:
        """Return the state of an instance, accepted, allowed or failed, and what to say of it."""
        while name not in self._cases:
            case = next(self._coming, None)
            if case is None:
                return "failed", f"{name}: not checked, because:\n{self.look_over()}"
            self._cases[case.name] = case
        case = self._cases[name]
        if case.state == ACCEPTED:
            return "accepted", ""
        return "allowed" if case.state == ALLOWED else "failed", case.text

    def look_over(self) -> str:
        """Return what is wrong with the claim as a whole, empty if nothing is."""
        for case in self._coming:
            self._cases[case.name] = case
        troubles = [render_trouble(trouble) for trouble in self._report().troubles]
        # An instance without a test of its own must not fail unseen.
        tested = set(self._names)
        for name, case in self._cases.items():
            if name not in tested and case.state not in (ACCEPTED, ALLOWED):
                troubles.append(case.text)
        return "\n".join(troubles)

    def _report(self) -> Report:
        return check_lone_claim(self.path) if self._guard is None else self._guard.report()


def find_subject(path: Path, root: Path) -> Subject | None:
    """Return what is to be tested of a claim file, or of a manifest.

    None for a manifest whose claim file is met by itself. root: the folder below which the
    evidence of a claim is looked for that has none beside it.
    """
    folder = path.parent
    name = read_manifest(folder).claim
    if path.name == MANIFEST:
        return None if name is not None and is_met(folder / name) else Subject(path, folder)
    if name == path.name:
        return Subject(path, folder)
    return Subject(path, find_copies(find(root).folders).get(contents_of(path)))


def _list_names(claim: Claim, folder: Path) -> Iterator[str]:
    if isinstance(claim.graphs, GraphList):
        for position in range(
            1, _count_graphs(folder / claim.graphs.name, claim.graphs.format) + 1
        ):
            yield str(position)
    elif claim.growing is not None:
        for row in claim.rows:
            yield name_key(endless_key(claim, row))
    else:
        yield from map(name_key, claim.instance_keys())


def _count_graphs(path: Path, form: str | None) -> int:
    """Return how many graphs a file should hold: one, or one a line.

    It decides which tests there are, and not what they say: a test without a graph fails, and
    a graph without a test is looked at by the test of the whole claim.
    """
    one_a_line = ("graph6", "sparse6")
    endings = {ending for name in one_a_line for ending in FORMATS[name]}
    if form not in one_a_line and not (form is None and path.suffix in endings):
        return 1
    with path.open("rb") as file:
        return sum(1 for _ in file)
