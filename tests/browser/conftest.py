"""A headless browser, a live server, and a ledger that lets itself be emptied afterwards."""

import os
from pathlib import Path

import pytest

from lots.db import guards
from tests import factories

CHROMIUM = os.environ.get("CHROMIUM", "/usr/bin/chromium")
ARGS = [
    "--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage", "--disable-quic",
    "--no-first-run", "--disable-background-networking", "--disable-component-update",
    "--disable-sync", "--disable-default-apps",
]  # fmt: skip
AXE = (Path(__file__).parent / "vendor" / "axe.min.js").read_text()
PHONE = {"width": 390, "height": 844}
DESK = {"width": 1280, "height": 900}
RUN_AXE = """() => axe.run(document, {runOnly:
    ['wcag2a', 'wcag2aa', 'wcag21a', 'wcag21aa', 'wcag22aa'], resultTypes: ['violations'],
    preload: false})"""
# What a thumb must hit: links inside a sentence are exempt, as in WCAG 2.5.8.
SMALL = """() => [...document.querySelectorAll('a, button, summary, input, select, textarea')]
    .filter(one => one.checkVisibility() && one.type !== 'hidden' && one.type !== 'checkbox')
    .filter(one => !one.closest('.skip, svg') && getComputedStyle(one).display !== 'inline')
    .filter(one => one.getBoundingClientRect().height < 43.5)
    .map(one => one.outerHTML.slice(0, 120))"""
HEADINGS = """() => [...document.querySelectorAll('h1, h2, h3, h4')].map(one => +one.tagName[1])"""


@pytest.fixture(scope="session")
def browser():
    """Chromium, or a skip where there is none."""
    if not Path(CHROMIUM).exists():
        pytest.skip(f"no browser at {CHROMIUM}")
    # Playwright's own loop runs in this thread; Django would refuse the database beside it.
    os.environ.setdefault("DJANGO_ALLOW_ASYNC_UNSAFE", "true")
    from playwright.sync_api import sync_playwright

    with sync_playwright() as playwright:
        chromium = playwright.chromium.launch(executable_path=CHROMIUM, headless=True, args=ARGS)
        yield chromium
        chromium.close()


@pytest.fixture
def emptied_after(transactional_db):
    """Lift the triggers before the tables are emptied; the flush's migrate signal sets them."""
    guards.install()
    yield
    guards.remove()


@pytest.fixture
def served(emptied_after, live_server):
    """A small sugarhouse and the address it is served at."""
    return factories.sugarhouse(), live_server.url


class Visitor:
    """One person at one screen; every page they see is examined."""

    def __init__(self, browser, url, house, name, size=PHONE):
        self.url, self.house, self.problems = url, house, []
        phone = size == PHONE
        self.context = browser.new_context(viewport=size, is_mobile=phone, has_touch=phone)
        self.context.set_default_timeout(8000)
        self.page = self.context.new_page()
        self.page.on("console", self._heard)
        self.page.on("pageerror", lambda error: self.problems.append(str(error)))
        self.shots = os.environ.get("SUGARHOUSE_SHOTS")
        self.seen = set()
        self.page.goto(url + "/login/")
        self.page.fill("[name=username]", f"{house.facility.slug}-{name}")
        self.page.fill("[name=password]", "pass-word-1")
        self.press("Log in")

    def _heard(self, message):
        if message.type in ("error", "warning"):
            self.problems.append(message.text)

    def goto(self, path):
        self.page.goto(f"{self.url}/f/{self.house.facility.slug}/{path}")

    def press(self, name):
        with self.page.expect_navigation():
            self.page.get_by_role("button", name=name, exact=True).click()

    def follow(self, name):
        with self.page.expect_navigation():
            self.page.get_by_role("link", name=name, exact=True).first.click()

    def enter(self, **typed):
        """Fill a form: a choice by its words, anything else as typed."""
        for name, value in typed.items():
            field = self.page.locator(f"main [name={name}]")
            if field.evaluate("one => one.tagName") == "SELECT":
                choice = {"index": value} if isinstance(value, int) else {"label": value}
                field.select_option(**choice)
            else:
                field.fill(value)

    def says(self, words):
        text = self.page.inner_text("main")
        assert words in text, f"{words!r} is not in: {text}"

    def examine(self, name):
        """Refuse what shuts anyone out: axe's findings, sideways scroll, errors, small targets."""
        if self.shots:
            self.page.screenshot(path=f"{self.shots}/{name}.png", full_page=True)
        assert self.page.evaluate("document.documentElement.scrollWidth <= innerWidth"), (
            f"{name} scrolls sideways"
        )
        assert self.page.evaluate(SMALL) == [], f"small targets on {name}"
        levels = self.page.evaluate(HEADINGS)
        assert levels.count(1) == 1, f"{name} has {levels.count(1)} first headings"
        steps = zip(levels, levels[1:], strict=False)
        assert all(after - before <= 1 for before, after in steps), f"{name} skips a heading level"
        # At full height the action bar, which stays at the thumb, covers no field.
        size = self.page.viewport_size
        height = self.page.evaluate("document.documentElement.scrollHeight")
        self.page.set_viewport_size({"width": size["width"], "height": height})
        self.page.evaluate(AXE)
        found = self.page.evaluate(RUN_AXE)["violations"]
        self.page.set_viewport_size(size)
        told = [(one["id"], one["nodes"][0]["html"][:200], len(one["nodes"])) for one in found]
        assert told == [], f"axe on {name}"
        assert self.problems == [], f"console on {name}"


@pytest.fixture
def visit(browser, served):
    """Let a person come: ``visit("lead")``."""
    house, url = served
    come = []

    def visitor(name, size=PHONE):
        come.append(Visitor(browser, url, house, name, size))
        return come[-1]

    yield visitor
    for one in come:
        one.context.close()
