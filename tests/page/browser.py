"""A browser without a window, that opens pages from files and remembers what they ask for."""

from __future__ import annotations

import shutil
from collections.abc import Iterator
from contextlib import contextmanager
from dataclasses import dataclass, field
from importlib.util import find_spec
from pathlib import Path
from typing import Any

CHROMIUM = next(filter(None, map(shutil.which, ("chromium", "chromium-browser"))), None)
MISSING = CHROMIUM is None or find_spec("playwright") is None
REASON = (
    "the pages are NOT TRIED OUT: install chromium (Debian: apt-get install "
    "--no-install-recommends chromium) and pip install playwright (in certify[test])"
)
QUIET = [
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
]
LONG = 120_000
"""Milliseconds after which a check that takes a moment counts as one without end."""


@dataclass
class Visit:
    """One page in the browser. asked: all it asked for. errors: of its scripts."""

    page: Any
    asked: list[str] = field(default_factory=list)
    errors: list[str] = field(default_factory=list)

    def open(self, path: Path) -> None:
        self.page.goto(path.as_uri())

    def check(self) -> tuple[str, str]:
        """Press the button, and return the state and the words of the last line."""
        self.page.click("#check")
        return self.wait()

    def wait(self) -> tuple[str, str]:
        status = self.page.wait_for_selector("#status[data-state]", timeout=LONG)
        return status.get_attribute("data-state"), status.inner_text()

    def states(self) -> list[tuple[str, str]]:
        """Return state and words of every row."""
        cells = self.page.eval_on_selector_all(
            "#instances tbody .state",
            "cells => cells.map(cell => [cell.dataset.state, cell.textContent])",
        )
        return [(state, words) for state, words in cells]


@contextmanager
def browser() -> Iterator[Any]:
    from playwright.sync_api import sync_playwright

    with sync_playwright() as driver:
        program = driver.chromium.launch(executable_path=CHROMIUM, args=QUIET)
        yield program
        program.close()


@contextmanager
def visit(program: Any, script: str = "", **options: Any) -> Iterator[Visit]:
    """Yield a fresh page. script: runs before any of the page's own."""
    context = program.new_context(**options)
    page = context.new_page()
    page.add_init_script(script)
    found = Visit(page)
    page.on("request", lambda request: found.asked.append(request.url))
    page.on("pageerror", lambda error: found.errors.append(str(error)))
    page.on("console", lambda message: found.errors.append(message.text))
    yield found
    context.close()
