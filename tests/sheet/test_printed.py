"""The sheet in a browser: nothing fails, nothing overflows, all can be read in black and white, every page is there."""

from __future__ import annotations

import io
import re
from collections.abc import Iterator
from pathlib import Path
from typing import Any
from unicodedata import normalize

import pytest

from setupcheck.flow import review, vary
from setupcheck.jobfile.changing import Change
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.sheet import as_sheet
from setupcheck.shipped import shipped
from tests.sheet import browser as chromium

pytestmark = pytest.mark.skipif(not chromium.is_there(), reason=chromium.MISSING)

JOBS = sorted(path.stem for path in Path(shipped("jobs")).glob("*.yaml"))
CONTRAST = 7.0
"""Least contrast of text. Source: WCAG 2.1, 1.4.6 (from memory)."""


@pytest.fixture(scope="module")
def driver() -> Iterator[Any]:
    with chromium.browser() as found:
        yield found


@pytest.fixture(scope="module")
def sheets(tmp_path_factory: pytest.TempPathFactory) -> dict[str, Path]:
    """The sheet of every shipped job."""
    folder = tmp_path_factory.mktemp("sheets")
    made = {}
    for name in JOBS:
        made[name] = folder / f"{name}.html"
        made[name].write_text(as_sheet(review(shipped(f"jobs/{name}.yaml"))), encoding="utf-8")
    return made


@pytest.mark.parametrize("paper", chromium.PAPERS)
@pytest.mark.parametrize("name", JOBS)
def test_nothing_stands_out_of_its_paper_and_no_word_is_cut_off(
    driver: Any, sheets: dict[str, Path], name: str, paper: str
) -> None:
    chromium.as_printed(driver, sheets[name], paper)
    assert [] == overflowing(driver)
    assert [] == [entry for entry in driver.get_log("browser") if entry["level"] in ("SEVERE", "WARNING")]


def overflowing(driver: Any) -> list[str]:
    """What reaches beyond the page, or beyond the cell it stands in."""
    return driver.execute_script(
        """
        const wide = window.innerWidth + 1, found = [];
        for (const e of document.body.querySelectorAll('*')) {
          const r = e.getBoundingClientRect();
          const text = (e.textContent || '').trim().slice(0, 40);
          if (r.right > wide || r.left < -0.5) found.push('off the page: ' + e.tagName + ' ' + text);
          if (['TD', 'TH', 'LI', 'P', 'H1', 'H2', 'H3', 'DIV'].includes(e.tagName) && e.scrollWidth > e.clientWidth + 1
              && e.clientWidth > 0) found.push('too wide inside: ' + e.tagName + ' ' + text);
        }
        return found;
        """
    )


@pytest.mark.parametrize("paper", chromium.PAPERS)
def test_a_path_goes_on_in_the_next_line_between_its_words(driver: Any, tmp_path: Path, paper: str) -> None:
    text = shipped("jobs/spur-gear-on-mandrel.yaml").read_text(encoding="utf-8")
    assert text.count(", pressure_angle: 20 deg") == 1
    text = text.replace(", pressure_angle: 20 deg", "")
    file = tmp_path / "open.html"
    file.write_text(as_sheet(review(read_job_text(text, "open.yaml"))), encoding="utf-8")
    chromium.as_printed(driver, file, paper)
    told, broken = driver.execute_script(
        """
        const broken = [], told = [];
        for (const table of document.querySelectorAll('table.bad, table.said')) {
          const walk = document.createTreeWalker(table, NodeFilter.SHOW_TEXT);
          told.push(table.textContent);
          while (walk.nextNode()) for (const word of walk.currentNode.data.matchAll(/[A-Za-z]{4,}/g)) {
            const range = document.createRange();
            range.setStart(walk.currentNode, word.index);
            range.setEnd(walk.currentNode, word.index + word[0].length);
            const lines = new Set([...range.getClientRects()].map(r => Math.round(r.top)));
            if (lines.size > 1) broken.push(word[0]);
          }
        }
        return [told.join(' '), broken];
        """
    )
    assert "parts.gear.surfaces.teeth.pressure_angle" in told
    assert [] == broken


@pytest.mark.parametrize("name", JOBS)
def test_all_text_stands_out_from_its_ground(driver: Any, sheets: dict[str, Path], name: str) -> None:
    chromium.as_printed(driver, sheets[name], "A4")
    pale = driver.execute_script(
        """
        const light = c => { const [r, g, b] = c.map(v => { v /= 255; return v <= 0.03928 ? v / 12.92
          : Math.pow((v + 0.055) / 1.055, 2.4); }); return 0.2126 * r + 0.7152 * g + 0.0722 * b; };
        const numbers = t => t.match(/[0-9.]+/g).map(Number);
        const found = [];
        for (const e of document.body.querySelectorAll('*')) {
          if (!['#text'].some(n => [...e.childNodes].some(c => c.nodeName === n && c.textContent.trim()))) continue;
          const style = getComputedStyle(e), svg = e instanceof SVGElement;
          if (e.tagName === 'title') continue;
          const ink = numbers(svg ? style.fill : style.color).slice(0, 3);
          let ground = [255, 255, 255];
          for (let p = e; p && !svg; p = p.parentElement) {
            const c = numbers(getComputedStyle(p).backgroundColor);
            if (c.length === 3 || c[3] > 0) { ground = c.slice(0, 3); break; }
          }
          const [a, b] = [light(ink), light(ground)].sort((x, y) => y - x);
          if ((a + 0.05) / (b + 0.05) < arguments[0]) found.push(e.textContent.trim().slice(0, 40) + ' ' + ink);
        }
        return found;
        """,
        CONTRAST,
    )
    assert [] == pale


@pytest.mark.parametrize("paper", chromium.PAPERS)
@pytest.mark.parametrize("name", ["rotator-worm-wheel", "index-plate", "coupling-hub"])
def test_the_print_has_its_cover_every_operation_and_every_table(
    driver: Any, sheets: dict[str, Path], name: str, paper: str
) -> None:
    from pypdf import PdfReader

    found = review(shipped(f"jobs/{name}.yaml"))
    pages = PdfReader(io.BytesIO(chromium.as_pdf(driver, sheets[name], paper))).pages
    texts = [" ".join(normalize("NFKC", page.extract_text() or "").split()) for page in pages]  # no ligatures
    assert found.loaded.job.title in texts[0]
    assert found.verdict.upper() in texts[0]
    assert found.loaded.sha256 in texts[0].replace(" ", "")
    for setup in found.loaded.job.setups:
        (own,) = [number for number, text in enumerate(texts) if re.search(rf"\bOp {setup.op},", text)]
        assert own > 0
    for scope in found.book.instances("setup"):
        if found.book.get("divide.table", scope) is not None:
            assert any(f"INDEX TABLE, op {scope.op}" in text for text in texts)
    assert all(f"file {found.loaded.sha256[:8]}" in text for text in texts), "a page that nobody can put back"
    for setup in found.loaded.job.setups:
        marked = [n for n, text in enumerate(texts) if f"op {setup.op} {found.loaded.job.job} file" in text]
        (own,) = [number for number, text in enumerate(texts) if re.search(rf"\bOp {setup.op},", text)]
        assert marked == list(range(own, own + len(marked))), "every page of an operation says whose it is"
        assert marked
    assert "When a box falls outside" in texts[-1]
    assert f"page {len(texts)} of {len(texts)}" in texts[-1]
    assert all(len(text) > 60 for text in texts), "a page with nothing on it"


HOSTILE = "<script>window.broken = 1</script>\"' onload=alert(1) </td></table>{{ 7 * 7 }} \u202egnirts\u202c &lt;b&gt; ]]> <!--"


def test_hostile_text_stays_text(driver: Any, tmp_path: Path) -> None:
    """Every text a planner writes himself, all at once: script, quotes, tags, template marks, direction marks, no end."""
    found = vary(shipped("jobs/rotator-worm-wheel.yaml"), hostile_changes(found_texts())).after
    file = tmp_path / "hostile.html"
    file.write_text(as_sheet(found), encoding="utf-8")
    chromium.as_printed(driver, file, "A4")
    assert driver.execute_script("return window.broken") is None
    assert 0 == driver.execute_script("return document.querySelectorAll('script, [onload], b + script').length")
    assert [] == overflowing(driver)
    assert [] == [entry for entry in driver.get_log("browser") if entry["level"] == "SEVERE"]
    shown = driver.execute_script("return document.body.innerText")
    assert "<script>window.broken = 1</script>" in shown
    assert "{{ 7 * 7 }}" in shown
    assert "\u202e" not in shown
    sections = driver.execute_script(
        "return [...document.querySelectorAll('section')].every(s => s.parentElement.tagName === 'BODY')"
    )
    assert sections


def found_texts() -> list[str]:
    """Keys of the job that hold free text."""
    return ["title", "job", "revision", "setups.40.note", "setups.70.note", "parts.wheel.material", "parts.spindle.material",
            "require[1].name", "setups.70.join.stop.spacers[1].name", "checked[1].by", "checked[1].note",
            "setups.50.hold.square.by", "worm.material"]  # fmt: skip


def hostile_changes(keys: list[str]) -> list[Change]:
    quoted = (
        '"'
        + HOSTILE.replace("\\", "\\\\").replace('"', '\\"').replace("\u202e", "\\u202e").replace("\u202c", "\\u202c")
        + '"'
    )
    return [Change(key, quoted) for key in keys]
