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
LARGEST = 150_000
"""A picture has no more bytes than this, as it is fetched with the README."""


def caught() -> str:
    """The planted mistake of the README as it adds up, SVG."""
    return pictures(review(read_job_text(SHIMMED, "shimmed-jaws.yaml")))["stack-1"].draw()


def sheet() -> str:
    """The sheet of the good plan, HTML."""
    return as_sheet(review(ROOT / "jobs" / "rotator-worm-wheel.yaml"))


def shot(driver: Any, of: str, scale: float) -> bytes:
    """PNG of one element, as wide as it is, and as high, but for what a page of A4 does not hold."""
    box = driver.execute_script(
        "const r = document.querySelector(arguments[0]).getBoundingClientRect();"
        "return [r.left + scrollX, r.top + scrollY, r.width, Math.min(r.height, 1.3 * r.width)]",
        of,
    )
    clip = {**dict(zip(("x", "y", "width", "height"), box, strict=True)), "scale": scale}
    made = driver.execute_cdp_cmd("Page.captureScreenshot", {"clip": clip, "captureBeyondViewport": True})
    return base64.b64decode(made["data"])


def write() -> None:
    """Make the pictures anew."""
    PLACE.mkdir(exist_ok=True)
    with browser() as driver, tempfile.TemporaryDirectory() as folder:
        for name, text, of, scale in (
            ("sheet.png", sheet(), f"#{PAGE}", 1.2),
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
