"""What several tests of pages look at, made once."""

from __future__ import annotations

from pathlib import Path

import pytest

from certify.report.page.page import write_site
from tests.checker.folders import make_folder
from tests.page.pages import CLAIM, DEMOS, EVIL


@pytest.fixture(scope="session")
def site(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """The pages of all demo claims, as the command writes them."""
    folder = tmp_path_factory.mktemp("site")
    written, left_open = write_site([path.parent for path in DEMOS], folder / "deep" / "site")
    assert (len(written), left_open) == (len(DEMOS) + 1, 0)
    return folder / "deep" / "site"


@pytest.fixture(scope="session")
def small(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A folder with a cycle, obstructions, and clauses."""
    return make_folder(tmp_path_factory.mktemp("small") / "small", CLAIM % ("Small", ""))


@pytest.fixture(scope="session")
def evil(tmp_path_factory: pytest.TempPathFactory) -> Path:
    return make_folder(tmp_path_factory.mktemp("evil") / "&'#%41", CLAIM % (EVIL, EVIL))
