"""A plugin of pytest: `pytest proofs/` runs a test for each instance of each claim.

Collected are claim files, by the rule of `find.is_claim`, and manifests of which the
claim is no TOML file or is gone; everything else is left to pytest. What that needs is
imported when it is needed, so that other runs of pytest are not slower. A folder is checked
once, from front to back, as far as its tests ask. `-p no:certify` turns the plugin off.
"""

from __future__ import annotations

import os
from collections.abc import Iterator
from pathlib import Path
from typing import TYPE_CHECKING, NoReturn

import pytest

if TYPE_CHECKING:
    from certify.guard.items import Subject

WHOLE = "whole claim"
_SUBJECT = pytest.StashKey["Subject"]()


class UnacceptedError(Exception):
    """A test of a claim failed; the text says why, to whoever wrote the claim."""


def pytest_collect_file(file_path: Path, parent: pytest.Collector) -> ClaimFile | None:
    """Take a claim file, or a manifest without one."""
    if file_path.suffix.lower() != ".toml" and file_path.name != "manifest.json":
        return None
    from certify.guard.find import is_met

    if not is_met(file_path):
        return None
    from certify.guard.items import find_subject

    subject = find_subject(file_path, parent.config.rootpath)
    if subject is None:
        return None
    collected: ClaimFile = ClaimFile.from_parent(parent, path=file_path)
    collected.stash[_SUBJECT] = subject
    return collected


class ClaimFile(pytest.File):
    """A claim: a test for each instance, and one for the claim as a whole."""

    @property
    def subject(self) -> Subject:
        """Return the claim and its evidence."""
        return self.stash[_SUBJECT]

    def collect(self) -> Iterator[pytest.Item]:
        for name in self.subject.names():
            yield InstanceTest.from_parent(self, name=name)
        yield WholeTest.from_parent(self, name=WHOLE)


class _Test(pytest.Item):
    @property
    def subject(self) -> Subject:
        assert isinstance(self.parent, ClaimFile)
        return self.parent.subject

    def refuse(self, text: str) -> NoReturn:
        """Fail with a text; files are named as seen from where pytest was started."""
        raise UnacceptedError(text.replace(f"{self.config.invocation_params.dir}{os.sep}", ""))

    def repr_failure(self, excinfo: pytest.ExceptionInfo[BaseException]) -> object:  # type: ignore[override]
        if isinstance(excinfo.value, UnacceptedError):
            return str(excinfo.value)
        return super().repr_failure(excinfo)

    def reportinfo(self) -> tuple[os.PathLike[str] | str, int | None, str]:
        return self.path, None, f"{self.subject.shown}: {self.name}"


class InstanceTest(_Test):
    """The test of one instance: the checker accepts its evidence."""

    def runtest(self) -> None:
        state, text = self.subject.look_up(self.name)
        if state == "allowed":
            pytest.xfail(text)
        if state == "failed":
            self.refuse(text)


class WholeTest(_Test):
    """The test of the claim as a whole: nothing changed, missing, doubled or left over."""

    def runtest(self) -> None:
        text = self.subject.look_over()
        if text:
            self.refuse(text)
