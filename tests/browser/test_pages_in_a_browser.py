"""The pages in a real browser: no request, no error, no sideways scroll, text that can be read; on paper too.

Needs a Chromium of the system. Where there is none the tests are skipped, unless FORMCHECK_BROWSER_REQUIRED
is set, as it is in .ci/run.
"""

from __future__ import annotations

import base64
import os
import shutil
from pathlib import Path

import pytest

from formcheck.check.compare import compare_spectra
from formcheck.check.sweep import sweep_shades
from formcheck.report.compare import comparison_html
from formcheck.report.estimate import estimate_html
from formcheck.report.page import page_html, pages_html
from formcheck.report.sweep_page import sweep_html
from tests.report.sample_check import bare_check, hostile_check, sample_check
from tests.report.sample_estimate import sample_estimate

pytestmark = pytest.mark.browser

DEMO = Path(__file__).resolve().parents[2] / "demo_formulations"


def sweep_page(**asked) -> str:
    return sweep_html(sweep_shades(DEMO / "harbour_blue_screen_ink.yaml", **asked))


def comparison_page() -> str:
    readings = DEMO / "ladder" / "tidewater_readings.csv"
    return comparison_html(compare_spectra(
        readings, readings, columns=("pale tint over white", "middle tint over white"), scale="fraction"))


PAGES = {
    "shade": sweep_page,
    "sweep": lambda: sweep_page(vary="harbour blue paste=2..12 % w/w", grounds=["chart_white", "chart_black"]),
    "comparison": comparison_page,
    "check": lambda: page_html(sample_check()),
    "several": lambda: pages_html([sample_check(), bare_check(), hostile_check()]),
    "estimate": lambda: estimate_html(sample_estimate()),
}
LAUNCH = ["--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage", "--force-color-profile=srgb"]
WIDTHS = [360, 1280]


def missing(reason: str):
    if os.environ.get("FORMCHECK_BROWSER_REQUIRED"):
        pytest.fail(reason)
    pytest.skip(reason)


@pytest.fixture(scope="module")
def browser():
    chromium = shutil.which("chromium") or shutil.which("chromium-browser")
    if not chromium:
        missing("no chromium on this machine")
    try:
        from playwright.sync_api import sync_playwright
    except ImportError:
        missing("no playwright in this environment")
    with sync_playwright() as play:
        running = play.chromium.launch(executable_path=chromium, args=LAUNCH)
        yield running
        running.close()


@pytest.fixture
def opened(browser, tmp_path):
    """Opens one of PAGES from a file with the network shut; afterwards nothing may have gone wrong."""
    contexts: list = []
    complaints: list[str] = []
    requests: list[str] = []

    def open_page(name: str, *, width: int = 1280, scheme: str = "light"):
        file = tmp_path / f"{name}.html"
        file.write_text(PAGES[name](), encoding="utf-8")
        context = browser.new_context(viewport={"width": width, "height": 900}, color_scheme=scheme,
                                      offline=True)
        contexts.append(context)
        page = context.new_page()
        requests.clear()
        page.on("console", lambda message: complaints.append(message.text))
        page.on("pageerror", lambda error: complaints.append(str(error)))
        page.on("request", lambda request: requests.append(request.url))
        page.goto(file.as_uri())
        assert requests == [file.as_uri()]
        return page

    yield open_page
    for context in contexts:
        context.close()
    assert complaints == []
    assert all(url.startswith("file:") for url in requests)


@pytest.mark.parametrize("width", WIDTHS)
@pytest.mark.parametrize("name", PAGES)
def test_opens_without_a_request_an_error_or_a_sideways_scroll(opened, name, width):
    page = opened(name, width=width)
    assert page.evaluate("document.documentElement.scrollWidth") <= width
    if name in ("check", "estimate"):  # ordinary texts fit the frames of their tables, too
        assert page.locator(".frame").evaluate_all(
            "all => all.filter(f => f.scrollWidth > f.clientWidth + 1).map(f => f.ariaLabel)") == []


def test_the_style_sheet_got_past_the_policy(opened):
    page = opened("check")
    assert page.evaluate("getComputedStyle(document.querySelector('.finding')).display") == "grid"


def test_nothing_of_a_hostile_recipe_ran(opened):
    page = opened("several")
    assert page.locator("script").count() == 0
    assert "<script>alert(1)</script>" in page.locator("#r3-title").inner_text()


@pytest.mark.parametrize("scheme, dark", [("light", False), ("dark", True)])
def test_follows_the_readers_scheme(opened, scheme, dark):
    page = opened("check", scheme=scheme)
    red, green, blue = page.evaluate(
        "getComputedStyle(document.documentElement).backgroundColor.match(/\\d+/g).slice(0, 3).map(Number)")
    assert red == green == blue and (red < 80) == dark


@pytest.mark.parametrize("name", PAGES)
def test_the_tree_that_readers_aloud_get(opened, name):
    """Headings in steps, drawings with names, tables still tables when narrow."""
    page = opened(name, width=360)
    assert page.locator("main").count() == page.locator("h1").count() == page.locator("footer").count() == 1
    unnamed = "all => all.filter(one => !one.querySelector('title')?.textContent).length"
    assert page.get_by_role("img").evaluate_all(unnamed) == 0
    assert page.get_by_role("row").count() >= page.get_by_role("rowheader").count() > 0


def test_only_one_of_the_two_plots_is_there_at_each_width(opened):
    for width in WIDTHS:
        shown = opened("check", width=width).locator("svg.plot").filter(visible=True)
        assert shown.count() == 1
        size = shown.locator("text").first.evaluate("one => one.getBoundingClientRect().height")
        assert size >= 11  # px: axis numbers stay readable on a phone


def test_text_of_a_plot_can_be_selected(opened):
    page = opened("check")
    assert page.evaluate("""() => {
        const text = document.querySelector('.only-wide svg.plot text');
        getSelection().selectAllChildren(text);
        return getSelection().toString() === text.textContent && text.textContent.length > 0;
    }""")


@pytest.mark.parametrize("name", PAGES)
def test_prints_to_paper(opened, name, tmp_path):
    page = opened(name)
    page.emulate_media(media="print")
    assert page.evaluate("getComputedStyle(document.documentElement).backgroundColor") == "rgb(255, 255, 255)"
    paper = page.pdf(format="A4")
    assert paper.startswith(b"%PDF") and len(paper) > 10_000
    (tmp_path / f"{name}.pdf").write_bytes(paper)


def test_the_swatches_have_the_colours_they_are_called(opened, tmp_path):
    """A pixel of the screen picture, read back, is the predicted hex on the left, the wanted on the right."""
    page = opened("check")
    picture = tmp_path / "pair.png"
    page.locator("svg.pair").screenshot(path=picture)
    assert pixel(page, picture, x=0.25, y=0.3) == [0x00, 0x6F, 0xA3]
    assert pixel(page, picture, x=0.75, y=0.3) == [0x00, 0x72, 0xA8]


def pixel(page, picture: Path, *, x: float, y: float) -> list[int]:
    """Red, green and blue at a share of width and height, read by the browser itself in an empty page."""
    reader = page.context.new_page()
    data = base64.b64encode(picture.read_bytes()).decode()
    colour = reader.evaluate("""async ([data, x, y]) => {
        const image = new Image();
        image.src = 'data:image/png;base64,' + data;
        await image.decode();
        const canvas = document.createElement('canvas');
        [canvas.width, canvas.height] = [image.width, image.height];
        const brush = canvas.getContext('2d');
        brush.drawImage(image, 0, 0);
        return [...brush.getImageData(image.width * x, image.height * y, 1, 1).data].slice(0, 3);
    }""", [data, x, y])
    reader.close()
    return colour
