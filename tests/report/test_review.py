"""The review document: what it holds, what it escapes, and that the same input gives the same."""

import hashlib
import html
import os
import re
from html.parser import HTMLParser

import pytest

from tests.command.running import run

HOSTILE = "<img src=x onerror=alert(1)>"
LEG = """* leg with a net that means harm
C1 BAT 0 470u
L1 BAT {net} 33u
M1 BUS G1 {net} {net} FET
M2 {net} G2 0 0 FET
C2 BUS 0 470u
.model FET NMOS
"""
SHEET = """ports:
  battery: {between: [BAT, 0], voltage: [42 V, 58 V], supplies: [-80 A, 80 A]}
  bus: {between: [BUS, 0], voltage: [90 V, 120 V]}
switching: {frequency: 50 kHz, dead-time: 300 ns}
"""
ONE_DAY = {"SOURCE_DATE_EPOCH": "1790000000"}


class Outline(HTMLParser):
    """Tags with their attributes, and the text between them."""

    def __init__(self, document):
        super().__init__()
        self.tags: list[tuple[str, dict[str, str | None]]] = []
        self.texts: list[str] = []
        self.feed(document)

    def handle_starttag(self, tag, attrs):
        self.tags.append((tag, dict(attrs)))

    def handle_startendtag(self, tag, attrs):
        self.tags.append((tag, dict(attrs)))

    def handle_data(self, data):
        self.texts.append(data)

    @property
    def text(self):
        return " ".join(" ".join(self.texts).split())

    def named(self, name):
        return [attributes for tag, attributes in self.tags if tag == name]


def reported(folder, netlist, *more, environment=None):
    done = run("report", netlist, *more, folder=folder, environment=environment or ONE_DAY)
    assert (done.returncode, done.stderr) == (0, "")
    return done.stdout


@pytest.fixture
def leg(tmp_path):
    (tmp_path / "leg.cir").write_text(LEG.format(net="SW"), encoding="utf-8")
    (tmp_path / "leg.stage.yaml").write_text(SHEET, encoding="utf-8")
    return tmp_path


def test_the_head_names_what_was_checked_and_with_what(hut):
    text = Outline(reported(hut, "battery-bus-faulty.cir")).text
    for file in ("battery-bus-faulty.cir", "battery-bus-faulty.stage.yaml", "hut.parts.yaml"):
        assert hashlib.sha256((hut / file).read_bytes()).hexdigest() in text
    assert "2026-09-21, from SOURCE_DATE_EPOCH" in text
    assert "derating/plain-80-percent" in text
    assert "80 %" in text


def test_findings_carry_their_reason_their_remedy_and_their_cards(hut):
    page = Outline(reported(hut, "battery-bus-faulty.cir"))
    assert "no device in it conducts that way" in page.text
    assert "battery-bus-faulty.cir:17 Q1 BUS G1 SW IG-600-100" in page.text
    assert "lent by the valley workshop until the spares arrive" in page.text
    assert "ended: its findings count again" in page.text
    assert "discharge, isolate and measure before touching" in page.text


def test_what_was_not_checked_stands_beside_what_was_found(leg):
    text = Outline(reported(leg, "leg.cir")).text
    assert text.index("What was found") < text.index("What was not checked")
    assert "2 checks wait for ratings.blocking of part FET" in text


def test_every_link_inside_the_document_leads_somewhere(hut):
    page = Outline(reported(hut, "battery-bus-faulty.cir"))
    ids = [attributes["id"] for _, attributes in page.tags if "id" in attributes]
    assert len(ids) == len(set(ids))
    targets = {(attributes.get("href") or "").partition("#")[2] for attributes in page.named("a")}
    assert targets <= set(ids)
    assert all((a.get("href") or "").startswith("#") for a in page.named("a"))


def test_a_card_that_cannot_be_read_is_named_as_not_checked(leg):
    netlist = leg / "leg.cir"
    netlist.write_text(LEG.format(net="SW") + "Q7 BUS\n", encoding="utf-8")
    done = run("report", "leg.cir", "-o", "r.html", folder=leg, environment=ONE_DAY)
    assert done.returncode == 2
    text = Outline((leg / "r.html").read_text(encoding="utf-8")).text
    assert "Cards that could not be read" in text
    assert "leg.cir:8:" in text


def test_names_from_the_netlist_stay_text(tmp_path):
    folder = tmp_path
    name = "<img onerror=alert(1)>.cir"
    (folder / name).write_text(LEG.format(net="<b>SW"), encoding="utf-8")
    sheet = SHEET.replace("battery:", f'"{HOSTILE}":')
    (folder / "s.yaml").write_text(sheet, encoding="utf-8")
    document = reported(folder, name, "--stage", "s.yaml")
    page = Outline(document)
    assert not {tag for tag, _ in page.tags} & {"img", "b", "script", "iframe", "object"}
    assert not [a for _, a in page.tags for key in a if key.startswith("on")]
    assert html.escape("<b>SW") in document
    assert "<b>SW" not in document
    assert HOSTILE in page.text


def test_signs_that_turn_the_reading_direction_are_shown_as_codes(leg):
    (leg / "leg.cir").write_text(LEG.format(net="S\u202eW"), encoding="utf-8")
    document = reported(leg, "leg.cir")
    assert "\u202e" not in document
    assert r"S\u202eW" in document


def test_nothing_in_it_asks_for_a_file_or_runs(hut):
    document = reported(hut, "battery-bus.cir")
    page = Outline(document)
    assert not page.named("script")
    assert not page.named("link")
    assert not re.search(r"(?:src|href)\s*=\s*[\"'](?!#)", document)
    assert "url(" not in document
    assert "http" not in re.sub(r"http-equiv", "", document)


def test_the_same_input_gives_the_same_bytes(hut):
    first = reported(hut, "battery-bus-faulty.cir", "--rules", "derating/rac-benign")
    assert first == reported(hut, "battery-bus-faulty.cir", "--rules", "derating/rac-benign")


def test_without_a_date_asked_for_the_netlist_file_s_own_serves(leg):
    os.utime(leg / "leg.cir", (1_700_000_000, 1_700_000_000))
    document = reported(leg, "leg.cir", environment={"SOURCE_DATE_EPOCH": ""})
    assert "2023-11-14, of the file leg.cir" in Outline(document).text


def test_a_date_that_is_none_is_refused(leg):
    done = run("report", "leg.cir", folder=leg, environment={"SOURCE_DATE_EPOCH": "soon"})
    assert (done.returncode, done.stdout) == (2, "")
    assert "'soon' is no number of seconds" in done.stderr


def test_the_document_never_overwrites_an_input(leg):
    done = run("report", "leg.cir", "-o", "leg.stage.yaml", folder=leg, environment=ONE_DAY)
    assert done.returncode == 2
    assert (leg / "leg.stage.yaml").read_text(encoding="utf-8") == SHEET


PULSED = """* half bridge, its gates driven by sources
V1 BUS 0 100
M1 BUS G1 SW SW FET
M2 SW G2 0 0 FET
VG1 G1 SW PULSE(0 12 0 10n 10n 4u 10u)
VG2 G2 0 PULSE(0 12 4.3u 10n 10n 5.4u 10u)
L1 SW OUT 33u
C1 OUT 0 100u
R1 OUT 0 4
.model FET NMOS
"""


def test_gate_commands_of_the_netlist_are_drawn_and_told(tmp_path):
    (tmp_path / "half.cir").write_text(PULSED, encoding="utf-8")
    page = Outline(reported(tmp_path, "half.cir"))
    assert "Gate commands of SW over 10 us" in page.text
    told = [a.get("aria-label") or "" for a in page.named("svg")]
    assert [text for text in told if text.startswith("M1: on ") and "by VG1" in text]
    assert [text for text in told if text.startswith("M2: on ") and "by VG2" in text]


def test_without_gate_commands_the_timing_says_so(hut):
    page = Outline(reported(hut, "battery-bus.cir"))
    assert "No source of the netlist commands a gate of a leg" in page.text
    assert "Switching as stated, by leg" in page.text
    assert "300 ns" in page.text


def test_the_stress_sheet_sets_what_is_asked_beside_what_is_rated(hut):
    text = Outline(reported(hut, "battery-bus.cir")).text
    sheet = text[text.index("Stress sheet Switch positions") :]
    for words in ("Inductors and windings", "L1 33 uH", "150 A", "Capacitors of the power path"):
        assert words in sheet


def test_the_block_view_joins_ports_filter_and_leg(hut):
    page = Outline(reported(hut, "battery-bus.cir"))
    told = [a.get("aria-label") or "" for a in page.named("svg")]
    (blocks,) = [text for text in told if text.startswith("battery at ")]
    assert blocks == "battery at BATIN; bus at BUSOUT; L1 at BATIN, SW; SW at BUSOUT, SW"


def test_every_device_of_every_position_is_drawn_once(hut):
    for netlist in ("pump-npc.cir", "transfer-switch.cir"):
        page = Outline(reported(hut, netlist))
        told = " ".join(a.get("aria-label") or "" for a in page.named("svg"))
        devices = re.findall(r"\b([DQ]\d+) \S+ from ", told)
        assert len(devices) == len(set(devices)) > 4
