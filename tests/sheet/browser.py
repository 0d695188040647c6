"""A browser that prints: Chromium without a window, driven by its own driver. Both are packages of Debian."""

from __future__ import annotations

import base64
import shutil
from collections.abc import Iterator
from contextlib import contextmanager
from pathlib import Path
from typing import Any

MISSING = "no browser: install the Debian packages chromium and chromium-driver"
PAPERS = {"A4": (210.0, 297.0), "letter": (215.9, 279.4)}
"""Width and height [mm]. Source: ISO 216; letter is 8.5 x 11 in."""
EDGE = (13.0, 15.0, 15.0, 15.0)
"""Top, right, bottom and left edge that the sheet asks for [mm]."""


def is_there() -> bool:
    return bool(shutil.which("chromium") and shutil.which("chromedriver"))


@contextmanager
def browser() -> Iterator[Any]:
    """A driver of a fresh browser that keeps a log of its console."""
    from selenium.webdriver import Chrome
    from selenium.webdriver.chrome.options import Options
    from selenium.webdriver.chrome.service import Service

    options = Options()
    options.binary_location = shutil.which("chromium") or ""
    for said in ("--headless=new", "--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage", "--hide-scrollbars"):
        options.add_argument(said)
    options.set_capability("goog:loggingPrefs", {"browser": "ALL"})
    driver = Chrome(options=options, service=Service(shutil.which("chromedriver")))
    try:
        yield driver
    finally:
        driver.quit()


def as_printed(driver: Any, file: Path, paper: str) -> None:
    """Opens a file as it stands on paper: print rules, body as wide as the paper between its edges."""
    driver.execute_cdp_cmd("Emulation.setEmulatedMedia", {"media": "print"})
    width, height = PAPERS[paper]
    px = 96.0 / 25.4
    size = {"width": round((width - EDGE[1] - EDGE[3]) * px), "height": round((height - EDGE[0] - EDGE[2]) * px)}
    driver.execute_cdp_cmd("Emulation.setDeviceMetricsOverride", {**size, "deviceScaleFactor": 1, "mobile": False})
    driver.get(file.as_uri())


def _loaded(driver: Any, file: Path) -> None:
    """Waits for the whole file: on a busy machine the driver comes back early now and then, and an empty page is printed."""
    from selenium.webdriver.support.ui import WebDriverWait

    there = "return document.readyState === 'complete' && document.documentURI === arguments[0]"
    WebDriverWait(driver, 30).until(lambda d: d.execute_script(there, file.as_uri()))


def as_pdf(driver: Any, file: Path, paper: str) -> bytes:
    """The file printed."""
    driver.get(file.as_uri())
    _loaded(driver, file)
    width, height = PAPERS[paper]
    made = driver.execute_cdp_cmd(
        "Page.printToPDF",
        {"paperWidth": width / 25.4, "paperHeight": height / 25.4, "printBackground": True, "preferCSSPageSize": False},
    )
    return base64.b64decode(made["data"])
