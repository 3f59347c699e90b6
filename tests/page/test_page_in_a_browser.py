"""The page opened and driven in a real Chromium, headless."""

import shutil
from pathlib import Path

import pytest

import evolve
from evolve.page import report

pytest.importorskip("matplotlib")
webdriver = pytest.importorskip("selenium.webdriver")
CHROMIUM, DRIVER = shutil.which("chromium"), shutil.which("chromedriver")
pytestmark = pytest.mark.skipif(
    not (CHROMIUM and DRIVER), reason="no Chromium here (Debian: chromium, chromium-driver)"
)
CONFIG = Path(__file__).parents[2] / "configs" / "red_dwarf.toml"
FLAGS = ("--headless=new", "--no-sandbox", "--disable-gpu", "--no-first-run", "--disable-sync",
         "--disable-background-networking", "--disable-component-update")  # fmt: skip


@pytest.fixture(scope="module")
def page(tmp_path_factory):
    path = tmp_path_factory.mktemp("page") / "page.html"
    path.write_text(report(evolve.run(CONFIG)), encoding="utf-8")
    return path.as_uri()


@pytest.fixture(scope="module")
def browser(tmp_path_factory):
    options = webdriver.ChromeOptions()
    options.binary_location = CHROMIUM
    options.set_capability("goog:loggingPrefs", {"browser": "ALL", "performance": "ALL"})
    for flag in (*FLAGS, f"--user-data-dir={tmp_path_factory.mktemp('chromium')}"):
        options.add_argument(flag)
    driver = webdriver.Chrome(options=options, service=webdriver.ChromeService(DRIVER))
    yield driver
    driver.quit()


def one(browser, selector):
    return browser.find_element("css selector", selector)


def look(browser, width, scheme="light"):
    size = {"width": width, "height": 1200, "deviceScaleFactor": 1, "mobile": False}
    browser.execute_cdp_cmd("Emulation.setDeviceMetricsOverride", size)
    wanted = {"features": [{"name": "prefers-color-scheme", "value": scheme}]}
    browser.execute_cdp_cmd("Emulation.setEmulatedMedia", wanted)


def test_the_slider_moves_the_pair_and_the_marker(browser, page):
    look(browser, 1400)
    browser.get(page)
    slider, star = one(browser, ".panel input"), one(browser, ".panel .star-A")
    assert one(browser, ".panel").is_displayed()
    before = star.get_attribute("d"), one(browser, "[data-of=time]").text
    marker = one(browser, ".marker").location["x"]
    slider.send_keys(webdriver.Keys.ARROW_RIGHT * 40)
    assert one(browser, "[data-of=time]").text != before[1]
    assert star.get_attribute("d") != before[0]
    assert one(browser, ".marker").location["x"] > marker + 50
    slider.send_keys(webdriver.Keys.END)
    assert one(browser, "[data-of=time]").text == "10 Gyr"
    assert "10 Gyr" in slider.get_attribute("aria-valuetext")
    last = one(browser, ".marker").rect
    slider.send_keys(webdriver.Keys.HOME)
    assert one(browser, "[data-of=time]").text == "0 yr"
    assert one(browser, ".marker").location["x"] == marker and last["height"] > 200


def test_nothing_is_fetched_and_nothing_complains(browser, page):
    browser.get_log("browser"), browser.get_log("performance")
    browser.get(page)
    assert browser.get_log("browser") == []
    asked = [entry["message"] for entry in browser.get_log("performance") if "requestWillBeSent" in entry["message"]]
    assert all('"url":"http' not in message for message in asked)


@pytest.mark.parametrize("width", [420, 1400])
def test_it_fits_both_widths(browser, page, width):
    look(browser, width)
    browser.get(page)
    assert browser.execute_script("return document.documentElement.scrollWidth") <= width
    size = browser.execute_script("return getComputedStyle(document.querySelector('p')).fontSize")
    assert float(size.removesuffix("px")) >= 14.0


def test_dark_and_light(browser, page):
    grounds = []
    for scheme in ("light", "dark"):
        look(browser, 1400, scheme)
        browser.get(page)
        ground = browser.execute_script("return getComputedStyle(document.body).backgroundColor")
        grounds.append(sum(int(part) for part in ground.strip("rgb()").split(",")))
    assert grounds[0] > 700 and grounds[1] < 150


def test_without_script_it_still_tells_and_shows(browser, page):
    browser.execute_cdp_cmd("Emulation.setScriptExecutionDisabled", {"value": True})
    try:
        browser.get(page)
        assert not one(browser, ".panel").is_displayed()
        assert "fills its Roche lobe" in one(browser, "main").text
        assert one(browser, "figure svg").size["height"] > 100
    finally:
        browser.execute_cdp_cmd("Emulation.setScriptExecutionDisabled", {"value": False})
