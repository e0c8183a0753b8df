"""The page of a claim: what it holds, and that it is safe."""

from __future__ import annotations

import base64
import json
import re
from html.parser import HTMLParser
from pathlib import Path

import pytest

from certify.errors import ContradictionError, InputError
from certify.report.blocks import Paragraph, Rows, mark
from certify.report.page.html import set_data, set_html
from certify.report.page.page import need_names, render_page, write_site
from tests.checker.folders import Files, read_files, write_files
from tests.page.pages import DEMOS, NAMES, corrupt, lines_of

VOID = {"meta", "input", "img", "br", "link", "hr"}
TAGS = re.compile(r"<(?=[!/a-z])", re.IGNORECASE)


class Reader(HTMLParser):
    """Reads a page and complains about elements that do not nest. data: of script elements."""

    def __init__(self, text: str) -> None:
        super().__init__(convert_charrefs=True)
        self.open: list[str] = []
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.data: dict[str, str] = {}
        self.feed(text)
        self.close()
        assert self.open == []

    def handle_starttag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        assert len({name for name, _ in attrs}) == len(attrs), (tag, attrs)
        self.tags.append((tag, dict(attrs)))
        if tag not in VOID:
            self.open.append(tag)

    def handle_startendtag(self, tag: str, attrs: list[tuple[str, str | None]]) -> None:
        self.tags.append((tag, dict(attrs)))

    def handle_endtag(self, tag: str) -> None:
        assert self.open.pop() == tag

    def handle_data(self, data: str) -> None:
        if self.open and self.open[-1] == "script":
            name = self.tags[-1][1].get("id") or "page"
            self.data[name] = self.data.get(name, "") + data

    def files(self) -> Files:
        held = json.loads(self.data["files"])
        return {name: base64.b64decode(text) for name, text in held.items()}


def read_pages(site: Path) -> dict[str, str]:
    return {path.stem: path.read_text(encoding="utf-8") for path in sorted(site.glob("*.html"))}


def test_there_are_demos() -> None:
    assert len(DEMOS) >= 5


def test_pages_are_well_formed_and_name_nothing_outside(site: Path) -> None:
    pages = read_pages(site)
    assert sorted(pages) == sorted(["index", *NAMES])
    for name, text in pages.items():
        page = Reader(text)
        ids = [attributes["id"] for _, attributes in page.tags if "id" in attributes]
        assert len(set(ids)) == len(ids), name
        for tag, attributes in page.tags:
            assert not {"src", "srcset", "action", "background", "data"} & set(attributes), tag
            assert not any(key.startswith("on") for key in attributes), (tag, attributes)
            target = attributes.get("href") or "#"
            assert target[0] == "#" or (site / target).is_file(), target
            assert target[0] != "#" or target == "#" or target[1:] in ids, target
            assert tag not in {"link", "base", "iframe", "object", "embed", "img"}
        assert "url(" not in re.sub(r"<script.*?</script>", "", text, flags=re.DOTALL)
        assert "@import" not in text
        assert "default-src 'none'" in text


def test_a_page_holds_the_folder_byte_for_byte(site: Path) -> None:
    for manifest in DEMOS:
        folder = manifest.parent
        page = Reader((site / f"{folder.name}.html").read_text(encoding="utf-8"))
        listed = json.loads(manifest.read_bytes())["sha256"]
        assert page.files() == {
            name: (folder / name).read_bytes() for name in ["manifest.json", *listed]
        }
        rows = [attributes for tag, attributes in page.tags if "data-answer" in attributes]
        records = [json.loads(line) for line in lines_of(folder)]
        assert [(row["data-answer"], row["data-kind"]) for row in rows] == [
            (record["answer"], record["kind"]) for record in records
        ]
        reasons = [attributes for tag, attributes in page.tags if tag == "details"]
        assert len(reasons) == len(rows) + 1


def test_a_page_shows_figures_and_reasons(site: Path) -> None:
    text = (site / "knight-closed.html").read_text(encoding="utf-8")
    assert text.count("<svg") > 10
    assert "has no Hamiltonian cycle" in text
    assert "m * n &lt;= 48" in text


def test_machine_proofs_are_pointed_to(small: Path) -> None:
    text = render_page(small).text
    for name in ("n=7.cnf.gz", "n=7.lrat.gz", "n=7.drat.gz"):
        digest = json.loads((small / "manifest.json").read_bytes())["sha256"][f"clauses/{name}"]
        told = f"<code>clauses/{name}</code>, SHA-256 <code>{digest}</code>"
        assert told in text.replace('<span class="whole">', "").replace("</span>", "")


def test_the_same_folder_gives_the_same_bytes(small: Path, site: Path, tmp_path: Path) -> None:
    first, _ = write_site([small], tmp_path / "one")
    second, _ = write_site([small], tmp_path / "two")
    assert [path.name for path in first] == ["index.html"]
    assert first[0].read_bytes() == second[0].read_bytes()
    (again,), _ = write_site([DEMOS[0].parent], tmp_path / "three")
    alone = again.read_text(encoding="utf-8")
    beside = (site / f"{NAMES[0]}.html").read_text(encoding="utf-8")
    assert beside.replace('<p class="back"><a href="index.html">All claims</a></p>\n', "") == alone


def test_a_hostile_title_stays_a_text(evil: Path, small: Path, tmp_path: Path) -> None:
    write_site([evil, small], tmp_path / "site")
    for text in read_pages(tmp_path / "site").values():
        page = Reader(text)
        assert "img" not in [tag for tag, _ in page.tags]
        assert not [attributes for _, attributes in page.tags if "onerror" in attributes]
        scripts = [attributes for tag, attributes in page.tags if tag == "script"]
        assert len(scripts) in (0, 4)
    assert "window.ran=1&lt;/script&gt;" in render_page(evil).text


def test_data_cannot_break_out_of_its_element() -> None:
    value = {"</script><script>": "<!--<script>]]>&lt;\u2028\u2029\x00é"}
    text = set_data("name", value)
    inner = text.removeprefix('<script type="application/json" id="name">')
    inner = inner.removesuffix("</script>")
    assert not TAGS.search(inner)
    assert not set("<>&\u2028\u2029") & set(inner)
    assert json.loads(inner) == value


def test_blocks_are_set_and_escaped() -> None:
    blocks = [
        Paragraph(f"An <edge> {mark('(1, 2)-(3, 4)')} & more", 1),
        Rows(((mark("a<b"), "x > y"),), 9),
        Rows((("", mark("1 2 3")),)),
    ]
    assert set_html(blocks) == (
        '<p class="deep-1">An &lt;edge&gt; <span class="whole">(1, 2)\u2013(3, 4)</span> '
        "&amp; more</p>\n"
        '<dl class="rows deep-6"><div><dt><span class="whole">a&lt;b</span></dt>'
        "<dd>x &gt; y</dd></div></dl>\n"
        '<p class="sequence"><span class="whole">1 2 3</span></p>'
    )


def test_what_is_rejected_gets_no_page(small: Path, tmp_path: Path) -> None:
    files = read_files(small)
    broken = write_files(tmp_path / "broken", corrupt(files))
    with pytest.raises(ContradictionError, match=r"n': 5.*\n  next: certify check"):
        write_site([small, broken], tmp_path / "site")
    assert not (tmp_path / "site").exists()
    (tmp_path / "empty").mkdir()
    with pytest.raises(InputError, match="no evidence here"):
        render_page(tmp_path / "empty")


def test_names_of_folders_have_to_differ(small: Path, tmp_path: Path) -> None:
    for name in ("SMALL", "small"):
        with pytest.raises(InputError, match="is taken already"):
            need_names([small, tmp_path / name], taken=())
    with pytest.raises(InputError, match="is taken already"):
        need_names([tmp_path / "Index"], taken=("index",))
    for name in ("a\nb", "a:b", ".a", "a\\b"):
        with pytest.raises(InputError, match="cannot be that of a file everywhere"):
            need_names([tmp_path / name], taken=())
    with pytest.raises(InputError, match="cannot be that of a file everywhere"):
        need_names([Path("/")], taken=())
