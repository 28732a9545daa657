"""A headless Chromium of the system, and the reviews of every demo stage to open in it.

Without Chromium or the driver (`pip install -e '.[browser]'`) these tests are skipped; `.ci/run`
installs both and runs them in a step of its own.
"""

import shutil
from collections.abc import Iterator
from dataclasses import dataclass, field
from pathlib import Path
from typing import Any

import pytest

from tests.command.running import run

CHROMIUM = shutil.which("chromium") or shutil.which("chromium-browser")
QUIET = (
    "--no-sandbox",
    "--disable-gpu",
    "--disable-quic",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
)
ONE_DAY = {"SOURCE_DATE_EPOCH": "1790000000"}


@dataclass
class Opened:
    """A page in the browser, with all that it complained of and asked for."""

    page: Any
    complaints: list[str] = field(default_factory=list)
    requests: list[str] = field(default_factory=list)


class Reader:
    """Opens documents; each in a page of its own, without a network."""

    def __init__(self, browser: Any) -> None:
        self.browser = browser

    def open(self, document: Path, width: int = 1240, scheme: str = "light") -> Opened:
        context = self.browser.new_context(
            viewport={"width": width, "height": 900}, offline=True, color_scheme=scheme
        )
        opened = Opened(context.new_page())
        page = opened.page
        page.on("pageerror", lambda error: opened.complaints.append(str(error)))
        page.on("console", lambda message: opened.complaints.append(message.text))
        page.on("dialog", lambda dialog: opened.complaints.append(f"dialog: {dialog.message}"))
        page.on("request", lambda request: opened.requests.append(request.url))
        page.goto(document.resolve().as_uri())
        return opened


@pytest.fixture(scope="session")
def reader() -> Iterator[Reader]:
    sync_api = pytest.importorskip("playwright.sync_api", reason="no browser driver is installed")
    if CHROMIUM is None:
        pytest.skip("no Chromium is installed")
    with sync_api.sync_playwright() as driver:
        browser = driver.chromium.launch(executable_path=CHROMIUM, args=list(QUIET))
        yield Reader(browser)
        browser.close()


@pytest.fixture(scope="session")
def reviews(tmp_path_factory: pytest.TempPathFactory) -> Path:
    """A folder with the review of each demo stage, `NAME.html` for `NAME.cir`."""
    folder = tmp_path_factory.mktemp("reviews")
    assert run("demo", "hut", folder=folder).returncode == 0
    for netlist in sorted((folder / "hut").glob("*.cir")):
        document = netlist.with_suffix(".html").name
        done = run("report", netlist.name, "-o", document, folder=netlist.parent,
                   environment=ONE_DAY)  # fmt: skip
        assert (done.returncode, done.stderr) == (0, "")
    return folder / "hut"
