"""The review as its readers open it: on a screen, on a phone, by keyboard, on paper."""

import io
import re
import unicodedata

import pytest

from tests.command.running import run
from tests.report.browser.conftest import ONE_DAY
from tests.report.browser.stages import DEMO, many_legs

axe = pytest.importorskip("axe_playwright_python.sync_playwright", reason="no axe is installed")
pypdf = pytest.importorskip("pypdf", reason="no reader of PDF is installed")

GRAVE = {"serious", "critical"}
PAPERS = {"A4": 184, "Letter": 190}
"""Width between the page's own margins, millimetres."""
PIXELS_A_MILLIMETRE = 96 / 25.4
OVERFLOWING = """() => {
  const room = document.documentElement.clientWidth + 1;
  return [...document.querySelectorAll('table, svg, pre, p, figure, dl, li')]
    .filter(e => e.getBoundingClientRect().right > room)
    .map(e => e.tagName + ' ' + e.textContent.trim().slice(0, 60));
}"""
FOCUSED = """() => {
  const link = document.activeElement;
  if (!link.classList.contains('plane')) return null;
  const tip = link.parentElement.querySelector('.tip');
  return [link.getAttribute('href'), getComputedStyle(tip).display, tip.innerText.trim()];
}"""


def positions_of(page):
    return page.locator("article.position").count()


@pytest.mark.parametrize("name", DEMO)
def test_it_opens_without_complaint_and_asks_for_nothing(name, reader, reviews):
    opened = reader.open(reviews / f"{name}.html")
    assert opened.complaints == []
    assert opened.requests == [(reviews / f"{name}.html").resolve().as_uri()]
    assert opened.page.locator("ul.wall > li > a.plane svg").count() == positions_of(opened.page)
    assert positions_of(opened.page) > 0


@pytest.mark.parametrize("name", DEMO)
def test_the_keyboard_reaches_every_plane_and_shows_its_numbers(name, reader, reviews):
    page = reader.open(reviews / f"{name}.html").page
    seen = {}
    for _ in range(400):
        page.keyboard.press("Tab")
        found = page.evaluate(FOCUSED)
        if found is not None:
            seen[found[0]] = found[1:]
        elif seen:
            break
    anchors = [f"#position-{k}" for k in range(1, positions_of(page) + 1)]
    assert sorted(seen) == sorted(anchors)
    assert all(display != "none" and "blocks" in text for display, text in seen.values())
    page.keyboard.press("Shift+Tab")
    page.keyboard.press("Enter")
    assert page.url.rpartition("#")[2] in {anchor[1:] for anchor in anchors}


@pytest.mark.parametrize("width", [390, 820, 1240])
@pytest.mark.parametrize("name", DEMO)
def test_nothing_runs_out_of_the_screen(name, width, reader, reviews):
    page = reader.open(reviews / f"{name}.html", width).page
    assert page.evaluate("() => document.documentElement.scrollWidth") <= width


@pytest.mark.parametrize("paper", PAPERS)
@pytest.mark.parametrize("name", DEMO)
def test_no_table_is_cut_on_paper(name, paper, reader, reviews):
    width = int(PAPERS[paper] * PIXELS_A_MILLIMETRE)
    page = reader.open(reviews / f"{name}.html", width).page
    page.emulate_media(media="print")
    assert page.evaluate(OVERFLOWING) == []
    printed = pypdf.PdfReader(io.BytesIO(page.pdf(format=paper, print_background=True)))
    text = " ".join(sheet.extract_text() for sheet in printed.pages)
    cells = " ".join(page.locator("th, td").all_text_contents())
    printed_signs = "".join(unicodedata.normalize("NFKC", text).split())
    assert [word for word in sorted(_words(cells)) if word not in printed_signs] == []


def _words(text):
    """Words that fit into a column: a longer one, such as a hash, is broken between lines.

    A PDF may set two letters as one sign, which is taken apart.
    """
    plain = unicodedata.normalize("NFKC", text)
    return {word for word in re.findall(r"\w+", plain) if len(word) <= 14}


@pytest.mark.parametrize("scheme", ["light", "dark"])
@pytest.mark.parametrize("name", DEMO)
def test_nothing_keeps_anybody_from_reading_it(name, scheme, reader, reviews):
    page = reader.open(reviews / f"{name}.html", scheme=scheme).page
    found = axe.Axe().run(page).response["violations"]
    grave = [
        (entry["id"], entry["help"], [node["html"][:200] for node in entry["nodes"][:3]])
        for entry in found
        if entry["impact"] in GRAVE
    ]
    assert grave == []


def test_a_name_that_is_markup_does_nothing(reader, tmp_path):
    hostile = "<img/onerror>"
    netlist = (
        f"* leg\nC1 BAT 0 470u\nL1 BAT {hostile} 33u\nM1 BUS G1 {hostile} {hostile} FET\n"
        f"M2 {hostile} G2 0 0 FET\nC2 BUS 0 470u\n.model FET NMOS\n"
    )
    sheet = (
        'ports:\n  "<img src=x onerror=alert(1)>": {between: [BAT, 0], voltage: 48 V,'
        " supplies: [-9 A, 9 A]}\n"
        '  "</style><script>alert(2)</script>": {between: [BUS, 0], voltage: 90 V}\n'
    )
    (tmp_path / "leg.cir").write_text(netlist, encoding="utf-8")
    (tmp_path / "leg.stage.yaml").write_text(sheet, encoding="utf-8")
    done = run("report", "leg.cir", "-o", "leg.html", folder=tmp_path, environment=ONE_DAY)
    assert (done.returncode, done.stderr) == (0, "")
    opened = reader.open(tmp_path / "leg.html")
    assert opened.complaints == []
    assert len(opened.requests) == 1
    assert opened.page.locator("img, script").count() == 0
    assert hostile in opened.page.inner_text("body")


def test_three_hundred_positions_open(reader, tmp_path, capsys):
    netlist, sheet = many_legs(150)
    (tmp_path / "many.cir").write_text(netlist, encoding="utf-8")
    (tmp_path / "many.stage.yaml").write_text(sheet, encoding="utf-8")
    done = run("report", "many.cir", "-o", "many.html", folder=tmp_path, environment=ONE_DAY)
    assert (done.returncode, done.stderr) == (0, "")
    size = (tmp_path / "many.html").stat().st_size
    opened = reader.open(tmp_path / "many.html")
    page = opened.page
    timing = page.evaluate(
        "() => { const t = performance.getEntriesByType('navigation')[0];"
        " return [t.domContentLoadedEventEnd, t.loadEventEnd]; }"
    )
    frames = page.evaluate(
        """async () => {
          let longest = 0, last = performance.now();
          for (let k = 0; k < 60; k++) {
            window.scrollBy(0, document.documentElement.scrollHeight / 60);
            await new Promise(requestAnimationFrame);
            const now = performance.now();
            longest = Math.max(longest, now - last);
            last = now;
          }
          return longest;
        }"""
    )
    with capsys.disabled():
        print(
            f"\n300 positions: {size / 1e6:.2f} MB, content ready after {timing[0]:.0f} ms,"
            f" loaded after {timing[1]:.0f} ms, longest frame of a scroll to the end"
            f" {frames:.0f} ms"
        )
    assert size < 5_000_000
    assert positions_of(page) == 300
    assert page.locator("ul.wall a.plane").count() == 300
    assert opened.complaints == []
