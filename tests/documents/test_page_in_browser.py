"""The page in a real browser: no complaint, no request, prints on whole pages.

Needs Chromium. Where it is missing the tests are skipped on a workstation and fail under CI,
which sets the environment variable CI.
"""

from __future__ import annotations

import os
import re
import shutil
import subprocess
from pathlib import Path

import pytest

from optimizer.documents.page import page_html
from optimizer.options import OptionsResult
from optimizer.results import CheckResult, RankResult
from tests.documents.options_jobs import optioned
from tests.documents.page_jobs import Reader, checked, ranked

_QUIET = (
    "--headless", "--no-sandbox", "--disable-gpu", "--disable-quic", "--no-first-run",
    "--disable-background-networking", "--disable-component-update", "--disable-sync",
    "--disable-dev-shm-usage", "--enable-logging=stderr", "--v=0",
)  # fmt: skip
_PAGE_OBJECT = re.compile(rb"/Type\s*/Page\b(?!s)")
# The browser logs what pages tell it under this name; its own troubles with a missing desktop
# (dbus and the like) come from other sources.
_FROM_PAGE = re.compile(r"CONSOLE|Refused to|net::ERR", flags=re.IGNORECASE)


@pytest.fixture(scope="session")
def browser() -> str:
    """Return the path of the browser."""
    path = shutil.which("chromium")
    if path is None:
        hint = "chromium is not on the path; hint: apt-get install -y chromium"
        if os.environ.get("CI"):
            pytest.fail(hint)
        pytest.skip(hint)
    return path


def run(browser: str, folder: Path, page: str, *arguments: str) -> tuple[str, str]:
    """Open a page from disk and return what the browser says on stdout and stderr."""
    file = folder / "page.html"
    file.write_text(page, encoding="utf-8")
    done = subprocess.run(
        [browser, *_QUIET, f"--user-data-dir={folder / 'profile'}", *arguments, file.as_uri()],
        capture_output=True,
        timeout=120,
        check=True,
    )
    return done.stdout.decode("utf-8"), done.stderr.decode("utf-8", "replace")


RESULTS = [ranked("us"), ranked("si"), checked("us")]


@pytest.mark.parametrize(
    "result", [*RESULTS, optioned("us")], ids=["rank us", "rank si", "check us", "options us"]
)
def test_opens_without_a_complaint(
    result: RankResult | CheckResult | OptionsResult, browser: str, tmp_path: Path
) -> None:
    """The browser keeps every element as written and logs nothing about the page."""
    page = page_html(result)
    dom, log = run(browser, tmp_path, page, "--dump-dom")
    assert Reader(dom).tags == Reader(page).tags
    assert [line for line in log.splitlines() if _FROM_PAGE.search(line)] == []


def test_complaints_are_seen(browser: str, tmp_path: Path) -> None:
    """The look-out above works: a refused script and a refused picture are logged."""
    planted = '<script>1</script><img src="https://cagewright.invalid/x.png"></body>'
    page = page_html(ranked("si")).replace("</body>", planted)
    _, log = run(browser, tmp_path, page, "--dump-dom")
    complaints = [line for line in log.splitlines() if _FROM_PAGE.search(line)]
    assert any("script" in line for line in complaints)
    assert any("cagewright.invalid" in line for line in complaints)


def printed(browser: str, folder: Path, page: str, paper: str) -> int:
    """Return the number of pages on paper."""
    target = folder / "page.pdf"
    sized = page.replace("@page {", f"@page {{ size: {paper};")
    run(browser, folder, sized, "--no-pdf-header-footer", f"--print-to-pdf={target}")
    return len(_PAGE_OBJECT.findall(target.read_bytes()))


@pytest.mark.parametrize("paper", ["A4", "Letter"])
@pytest.mark.parametrize("result", RESULTS, ids=["rank us", "rank si", "check us"])
def test_prints_on_whole_pages(
    result: RankResult | CheckResult, paper: str, browser: str, tmp_path: Path
) -> None:
    """Head, each section and each worked check start a page; a check takes two to three.

    The exact number hangs on the fonts of the machine; these are its limits.
    """
    page = page_html(result)
    pages = printed(browser, tmp_path, page, paper)
    layouts = page.count('<section class="layout">')
    sections = len(result.sections)
    # A check of given layouts has its inputs and its worked check on one page.
    starts = 1 + sections + (layouts if isinstance(result, RankResult) else 0)
    assert starts < pages <= 1 + 2 * sections + 4 * layouts
    assert pages >= 1 + 2 * layouts


@pytest.mark.parametrize("paper", ["A4", "Letter"])
@pytest.mark.parametrize("units", ["us", "si"])
def test_options_print_on_whole_pages(units: str, paper: str, browser: str, tmp_path: Path) -> None:
    """Head, each section, each layout and the palette start a page.

    A section takes one to two pages, a layout with its calculation two to four, with its check
    alone one to two, and one more where it is compared with the drawn one.
    """
    result = optioned(units)
    page = page_html(result)
    pages = printed(browser, tmp_path, page, paper)
    worked = page.count("<h4>Calculation</h4>")
    layouts = page.count('<section class="layout">')
    compared = page.count('<table class="against">')
    sections = len(result.sections)
    ends = 1  # the palette, or the limits where they need a page of their own
    starts = 1 + sections + layouts + (result.palette is not None)
    assert starts + worked <= pages
    assert pages <= 1 + 2 * sections + 4 * worked + 2 * (layouts - worked) + compared + ends
