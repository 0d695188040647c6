"""The pictures of the README, made from what the tool prints. Needs Chromium with its driver; run this file to make them anew:

python -m tests.docs.pictures
"""

from __future__ import annotations

import base64
import tempfile
from pathlib import Path
from typing import Any

from setupcheck.flow import review
from setupcheck.jobfile.reading import read_job_text
from setupcheck.report.pictures import pictures
from setupcheck.report.sheet import as_sheet
from tests.golden.pages import ROOT, SHIMMED
from tests.sheet.browser import as_printed, browser

PLACE = ROOT / "docs" / "pictures"
PAGE = "op-50"
"""The operation whose page is shown."""
EDGE, HIGH = 20, 1.42
"""White round a picture [px], and how much higher than wide it may be."""
LARGEST = 150_000
"""A picture has no more bytes than this, as it is fetched with the README."""


def caught() -> str:
    """The planted mistake of the README as it adds up, SVG."""
    return pictures(review(read_job_text(SHIMMED, "shimmed-jaws.yaml")))["stack-1"].draw()


def sheet() -> str:
    """The sheet of the good plan, HTML."""
    return as_sheet(review(ROOT / "jobs" / "rotator-worm-wheel.yaml"))


WHERE = """
const [of, edge, high] = arguments, shown = document.querySelector(of), body = document.body;
for (const other of body.children) if (!other.contains(shown)) other.style.display = "none";
body.style.width = getComputedStyle(body).width;
body.style.margin = edge + "px";
const box = shown.getBoundingClientRect(), most = box.top + Math.min(box.height, high * box.width);
const ends = [...shown.querySelectorAll("tr")].map(row => row.getBoundingClientRect().bottom).filter(end => end <= most);
const end = ends.length ? Math.max(...ends) : most;
const below = end < box.bottom ? 3 : edge;
return [box.left + scrollX - edge, box.top + scrollY - edge, box.width + 2 * edge, end - box.top + edge + below];
"""
"""The frame round one element, which stands alone then; of a long one it ends under a line of a table."""


def shot(driver: Any, of: str, scale: float) -> bytes:
    """PNG of one element with white round it, of a long one what a page of A4 holds."""
    frame = driver.execute_script(WHERE, of, EDGE, HIGH)
    clip = {**dict(zip(("x", "y", "width", "height"), frame, strict=True)), "scale": scale}
    made = driver.execute_cdp_cmd("Page.captureScreenshot", {"clip": clip, "captureBeyondViewport": True})
    return base64.b64decode(made["data"])


def write() -> None:
    """Make the pictures anew."""
    PLACE.mkdir(exist_ok=True)
    with browser() as driver, tempfile.TemporaryDirectory() as folder:
        for name, text, of, scale in (
            ("sheet.png", sheet(), f"#{PAGE}", 1.1),
            ("caught.png", f"<!doctype html><body>{caught()}", "svg", 1.2),
        ):
            file = Path(folder, f"{name}.html")
            file.write_text(text, encoding="utf-8")
            as_printed(driver, file, "A4")
            made = shot(driver, of, scale)
            if len(made) > LARGEST:
                raise SystemExit(f"{name} has {len(made)} bytes, more than {LARGEST}: take a smaller scale")
            (PLACE / name).write_bytes(made)


if __name__ == "__main__":
    write()
