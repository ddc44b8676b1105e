"""The page: whole and self-contained, its marks on the right things, hostile words harmless, and the same in a browser."""

from __future__ import annotations

import re
import shutil
from html import unescape
from html.parser import HTMLParser
from math import hypot
from pathlib import Path

import pytest

from checker import audit, load
from checker.declared.model import Design
from checker.geometry.measure import measure
from checker.page.page import html_of
from checker.page.places import Places
from checker.review.catalogue import load_catalogue

ROOT = Path(__file__).parents[2]
CORPUS = ROOT / "tests/corpus"
EXAMPLES = ROOT / "examples/market-hall"
FLAWED = [
    EXAMPLES / "canopy-beam-dangerous.yaml",
    EXAMPLES / "edge-beam-mistakes.yaml",
    EXAMPLES / "link-bridge-box.json",
]
CHROMIUM = shutil.which("chromium")
HOSTILE = "<script>alert(1)</script>\"'&\u202e" + "x" * 10_000

VOID = {"meta", "input", "br"}


class Balanced(HTMLParser):
    """Every element opened is closed, in order; ids are unique."""

    def __init__(self) -> None:
        super().__init__()
        self.open: list[str] = []
        self.ids: list[str] = []

    def handle_starttag(self, tag, attrs):
        self.ids += [value for key, value in attrs if key == "id"]
        if tag not in VOID:
            self.open.append(tag)

    def handle_startendtag(self, tag, attrs):
        self.ids += [value for key, value in attrs if key == "id"]

    def handle_endtag(self, tag):
        assert self.open
        assert self.open.pop() == tag


def hostile() -> Design:
    """Words that the reader of files would refuse are put in behind its back."""
    design = load(EXAMPLES / "canopy-beam-dangerous.yaml")
    case = design.cases[0]._replace(name=HOSTILE)
    links = design.links[0]._replace(mark=HOSTILE)
    said = {"project": HOSTILE, HOSTILE: "key"}
    return design._replace(
        member=HOSTILE, file="<b>" + HOSTILE, submission=said, cases=(case,), links=(links,)
    )


def test_the_page_is_well_formed_and_holds_every_finding():
    report = audit(FLAWED)
    page = html_of(report)
    parser = Balanced()
    parser.feed(page)
    assert parser.open == []
    assert len(parser.ids) == len(set(parser.ids))
    for finding in report.findings:
        assert f'id="finding-{finding.number}"' in page
        assert finding.draft.says in unescape(page)
    assert not re.search(r"(?:src|href)=\"(?!#)", page), "nothing is fetched from anywhere"


def test_hostile_words_are_only_words():
    page = html_of(audit(hostile()))
    assert "<script>alert" not in page
    assert "&lt;script&gt;alert(1)" in page
    assert "<b>&lt;script" not in page
    assert "<b><script" not in page
    parser = Balanced()
    parser.feed(page)
    assert parser.open == []


def nearest_bar(places: Places, point: tuple[float, float]) -> float:
    return min(hypot(bar.x - point[0], bar.y - point[1]) - bar.diameter / 2 for bar in places.bars)


def of_failing(rule: str) -> tuple[Places, tuple[float, float]]:
    member = audit(CORPUS / rule / "fail.yaml").members[0]
    finding = next(finding for finding in member.findings if finding.draft.rule == rule)
    places = Places(member.design, member.measured)
    point = places.of(finding)
    assert point is not None, rule
    return places, point


ON_LINK = [rule for rule in load_catalogue().rules if rule.startswith("links.") and "leg-basis" not in rule]
INSIDE = {"links.leg-spacing", "links.inner-bends"}


@pytest.mark.parametrize("rule", sorted(set(ON_LINK) - INSIDE))
def test_marks_of_links_lie_on_the_link(rule):
    places, (x, y) = of_failing(rule)
    line = places.link_line()
    xs, ys = [p[0] for p in line], [p[1] for p in line]
    on = min(abs(x - min(xs)), abs(x - max(xs)), abs(y - min(ys)), abs(y - max(ys)))
    if places.web.shape in ("rectangle", "box"):
        assert on < 1
    assert places.measured.outline.distance_inside((x, y)) <= places.inwards + 1e-6 or on < 1


@pytest.mark.parametrize(
    "rule", ["bars.corner-size", "bars.large", "bars.mandrel", "bundles.size", "bundles.count"]
)
def test_marks_of_bars_lie_on_a_bar(rule):
    places, point = of_failing(rule)
    assert nearest_bar(places, point) <= 0


@pytest.mark.parametrize(
    "rule", ["bars.minimum", "bars.tension-half", "bars.compression-half", "bending.resistance"]
)
def test_marks_of_chords_lie_at_their_level(rule):
    places, (_, y) = of_failing(rule)
    inputs, h = places.measured.inputs, places.measured.outline.height
    assert min(abs(y - inputs["a_s_bottom"]), abs(y - h + inputs["a_s_top"])) < 1e-6


def test_the_mark_of_a_missing_corner_lies_in_it():
    places, point = of_failing("bars.corner")
    assert nearest_bar(places, point) > 0
    assert min(hypot(point[0] - x, point[1] - y) for x, y in places.link_line()) < 1e-6


def test_the_mark_of_a_wide_gap_lies_between_the_bars_that_leave_it():
    places, (x, y) = of_failing("bars.perimeter-gap")
    gap = places.measured.inputs["gap_bars"]
    near = sorted(hypot(bar.x - x, bar.y - y) for bar in places.bars)
    assert near[0] > 0.3 * gap
    assert near[1] < 0.75 * gap


@pytest.mark.parametrize("rule", ["bars.clear-for-size", "bars.clear-for-aggregate"])
def test_the_mark_of_a_narrow_gap_lies_in_it(rule):
    places, point = of_failing(rule)
    clear = places.measured.inputs["clear_by_size"]
    assert nearest_bar(places, point) == pytest.approx(clear / 2, abs=0.5 * clear)


def test_cover_is_marked_in_the_cover():
    places, point = of_failing("cover.least")
    assert 0 < places.measured.outline.distance_inside(point) < places.cage.cover


def test_every_drawing_says_its_facts_in_words():
    page = html_of(audit(FLAWED))
    drawings = re.findall(r"<svg.*?</svg>", page)
    assert len(drawings) == 4 * len(FLAWED)
    for drawing in drawings:
        assert re.search(r"<title id=\"[^\"]+\">[^<]+</title><desc id=\"[^\"]+\">[^<]+</desc>", drawing)


def test_bars_are_drawn_to_scale():
    design = load(EXAMPLES / "canopy-beam-dangerous.yaml")
    page = html_of(audit(design))
    section = re.search(r"<svg.*?</svg>", page)[0]
    dots = re.findall(r'<circle cx="([\d.]+)" cy="([\d.]+)" r="([\d.]+)" fill="var\(--ink', section)
    bars = measure(design).bars
    assert len(dots) == len(bars)
    (x0, y0, _), (x1, y1, _) = ([float(v) for v in dots[i]] for i in (0, -1))
    scale = hypot(x1 - x0, y1 - y0) / hypot(bars[-1].x - bars[0].x, bars[-1].y - bars[0].y)
    assert scale == pytest.approx(330 / 600, rel=0.01)


@pytest.fixture(scope="module")
def browser():
    if CHROMIUM is None:
        pytest.skip("no chromium on this machine: apt-get install chromium")
    from playwright.sync_api import sync_playwright

    with sync_playwright() as player:
        found = player.chromium.launch(executable_path=CHROMIUM, args=["--no-sandbox"])
        yield found
        found.close()


@pytest.fixture
def opened(browser, tmp_path):
    """The page opened from disk, with every request and every message of the console."""
    file = tmp_path / "report.html"
    file.write_text(html_of(audit([*FLAWED, hostile()])), encoding="utf-8")
    page = browser.new_page()
    page.asked, page.told = [], []
    page.on("request", lambda request: page.asked.append(request.url))
    page.on("console", lambda message: page.told.append(message.text))
    page.on("pageerror", lambda error: page.told.append(str(error)))
    page.on("dialog", lambda dialog: page.told.append(dialog.message))
    page.goto(file.as_uri())
    yield page
    page.close()


def test_browser_opens_it_from_disk_quietly(opened):
    assert len(opened.asked) == 1
    assert opened.told == []


def test_browser_filters_folds_and_follows_links(opened):
    total = opened.locator(".finding:visible").count()
    opened.select_option("#by-gravity", "unsafe")
    shown = opened.locator(".finding:visible")
    assert 0 < shown.count() < total
    assert {shown.nth(i).get_attribute("data-gravity") for i in range(shown.count())} == {"unsafe"}
    opened.select_option("#by-gravity", "")
    opened.fill("#by-words", "nothing says this")
    assert opened.locator("section.member:visible").count() == 0
    opened.fill("#by-words", "")
    badge = opened.locator("a.badge").first
    number = badge.get_attribute("data-number")
    badge.click()
    assert opened.evaluate("location.hash") == f"#finding-{number}"
    assert opened.locator(f"#finding-{number}").is_visible()
    opened.locator(f'#finding-{number} a[href="#mark-{number}"]').first.click()
    assert opened.evaluate("location.hash") == f"#mark-{number}"


def test_browser_works_by_keyboard_alone(opened):
    opened.keyboard.press("Tab")
    assert opened.evaluate("document.activeElement.className") == "skip"
    opened.focus("#all-open")
    opened.keyboard.press("Enter")
    assert opened.evaluate("[...document.querySelectorAll('details')].every((one) => one.open)")
    opened.focus("#index th button")
    opened.keyboard.press("Enter")
    assert opened.locator("#index th[aria-sort]").count() == 1


def test_browser_finds_no_barrier(opened):
    from axe_playwright_python.sync_playwright import Axe

    found = Axe().run(opened).response["violations"]
    assert [(rule["id"], [node["target"] for node in rule["nodes"]][:3]) for rule in found] == []


def test_browser_prints_every_number(opened, tmp_path):
    from pypdf import PdfReader

    numbers = [
        int(name.removeprefix("finding-"))
        for name in opened.locator(".finding").evaluate_all("all => all.map((one) => one.id)")
    ]
    opened.pdf(path=str(tmp_path / "report.pdf"), prefer_css_page_size=True)
    reader = PdfReader(tmp_path / "report.pdf")
    text = re.sub(r"\s+", " ", " ".join(page.extract_text() for page in reader.pages))
    assert all(f"No. {number} " in text for number in numbers)
    width, height = (float(side) for side in reader.pages[0].mediabox[2:])
    assert (round(width), round(height)) == (595, 842)
