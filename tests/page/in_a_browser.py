"""The page of `lidwright report` in a browser: no error, nothing asked of the network, slider, zoom, the value under the
cursor, logarithmic axis, themes, phone width."""

import json
import os
import re
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import runs
from browser import Browser

TITLE = """</script><script>window.broken = 1</script> "a" 'b' & <b>{{data}}</b> \\ é"""
CHART = ".chart[data-column=nusselt_outer]"


def number(text):
    """A number as the page writes it."""
    mantissa, _, power = text.strip().replace("−", "-").partition(" × 10")
    return float(mantissa) * 10.0 ** int(power.translate(str.maketrans("⁻⁰¹²³⁴⁵⁶⁷⁸⁹", "-0123456789")) or 0)


def kept(page, name):
    return page.evaluate(f"(JSON.parse(sessionStorage.getItem('lidwright ' + location.pathname)) || {{}}).{name}")


def opens(page, path):
    page.open(path)
    assert page.evaluate("document.querySelector('h1').textContent") == TITLE
    assert page.evaluate("document.title") == TITLE + " · lidwright"
    assert page.evaluate("window.broken === undefined && document.querySelectorAll('h1 b').length === 0")
    headings = page.evaluate("[...document.querySelectorAll('main > section:not([hidden]) h2')].map((h) => h.textContent)")
    for wanted in ("Verdict", "Numbers", "Field", "History", "Profiles", "Can the run be trusted?", "What this is not fit for"):
        assert wanted in headings, headings
    assert page.evaluate("document.querySelectorAll('#figures tbody tr').length") >= 8


def slider(page, path):
    last = int(page.evaluate("document.getElementById('slider').max"))
    assert last >= 3 and page.evaluate("Number(document.getElementById('slider').value)") == last
    page.until(f"document.getElementById('shell').dataset.shown === '0 {last}'")
    look = "[document.getElementById('moment').textContent, document.getElementById('shell').toDataURL(), document.getElementById('profiles-note').textContent]"
    before = page.evaluate(look)
    page.evaluate("document.getElementById('slider').focus()")
    page.key("Home")
    page.until("document.getElementById('shell').dataset.shown === '0 0'")
    after = page.evaluate(look)
    assert before[0] != after[0] == "time 0 d²/κ" and before[1] != after[1] and before[2] != after[2], after[0]
    assert page.evaluate("document.getElementById('slider').getAttribute('aria-valuetext')") == after[0]
    page.key("ArrowRight")
    page.until("document.getElementById('shell').dataset.shown === '0 1'")
    page.click("#layers label:nth-of-type(2) input")
    page.until("document.getElementById('shell').dataset.shown === '1 1'")
    assert "logarithmic" in page.evaluate("document.getElementById('bar-title').textContent")
    page.click("#play")
    page.until(f"document.getElementById('shell').dataset.shown === '1 {last}'")
    page.until("document.getElementById('play').textContent === 'Play'")


def field_values(page, path):
    """What stands beside the picture is the temperature that the profile has at that depth, nearly."""
    page.click("#layers label:nth-of-type(1) input")
    page.until("document.getElementById('shell').dataset.shown.startsWith('0 ')")
    page.move("#shell", 0.5, 0.985)
    page.until("document.getElementById('under').textContent !== ''")
    value, depth = re.fullmatch(r"about (.*) ΔT at depth (.*) d", page.evaluate("document.getElementById('under').textContent")).groups()
    assert number(depth) < 0.1 and number(value) < 0.35, (value, depth)


def cursor(page, path):
    """The value under the cursor is the history's, to the digits that are shown."""
    names, *rows = [line.split(",") for line in runs.read(os.path.join(os.path.dirname(path), "history.csv")).splitlines() if line[0] != "#"]
    time_at, value_at = names.index("time"), names.index("nusselt_outer")
    of_time = {f"{float(row[time_at]):.7g}": float(row[value_at]) for row in rows}
    for across in (0.35, 0.6, 0.85):
        page.move(CHART, across)
        text = page.evaluate(f"document.querySelector('{CHART}').parentElement.querySelector('.readout').textContent")
        value, when = text.split(" at time ")
        there = of_time[f"{number(when):.7g}"]
        assert abs(number(value) - there) <= 1e-6 * abs(there), (text, there)
        others = page.evaluate("[...document.querySelectorAll('#panels .readout')].map((r) => r.textContent.split(' at time ')[1])")
        assert set(others) == {when}, (others, when)


def zoom(page, path):
    labels = "[...document.querySelectorAll('#panels .panel:nth-child(3) .dygraph-axis-label-x')].map((e) => e.textContent).join()"
    before = page.evaluate(labels)
    page.drag(CHART, 0.4, 0.6)
    page.until("(JSON.parse(sessionStorage.getItem('lidwright ' + location.pathname)) || {}).window")
    low, high = kept(page, "window")
    assert 0 < low < high and page.evaluate(labels) != before
    page.evaluate("document.querySelectorAll('#panels .chart')[1].focus()")
    page.key("ArrowRight")
    assert "at time" in page.evaluate("document.getElementById('said').textContent")
    page.click("#whole")
    page.until("!(JSON.parse(sessionStorage.getItem('lidwright ' + location.pathname)) || {}).window")
    assert page.evaluate(labels) == before


def logarithmic(page, path):
    for name in ("work_mismatch", "flow_error", "plateness"):
        page.evaluate(f"(() => {{ const box = document.querySelector('#columns input[value={name}]'); if (!box.checked) box.click(); }})()")
    remark = "document.querySelector('.chart[data-column=work_mismatch]').parentElement.querySelector('.remark').textContent"
    ticks = "[...document.querySelectorAll('.chart[data-column=flow_error] .dygraph-axis-label-y')].map((e) => e.textContent).join()"
    before = page.evaluate(ticks)
    page.click("#log")
    assert re.match(r"\d+ values not above 0 left out|No value is above 0", page.evaluate(remark)), page.evaluate(remark)
    assert "10⁻" in page.evaluate(ticks) and page.evaluate(ticks) != before
    page.click("#log")
    assert page.evaluate(ticks) == before


def themes(page, path):
    ground = "getComputedStyle(document.body).backgroundColor"
    page.prefers("light")
    light = page.evaluate(ground)
    page.prefers("dark")
    page.until(f"{ground} !== {json.dumps(light)}")
    page.click("#theme")
    assert page.evaluate(ground) == light and page.evaluate("document.getElementById('theme').getAttribute('aria-pressed')") == "false"
    page.prefers("light")


def narrow(page, path):
    page.evaluate("document.querySelectorAll('details').forEach((d) => { d.open = true; })")
    for width in (390, 320, 1200):
        page.width(width)
        page.until("new Promise((done) => requestAnimationFrame(() => setTimeout(() => done(true), 50)))")
        wide = page.evaluate("document.documentElement.scrollWidth")
        assert wide <= width, (width, wide)


def comes_back(page, path):
    """What the reader has set outlives the page's being read anew."""
    page.evaluate("document.getElementById('slider').focus()")
    page.key("Home")
    columns = page.evaluate("document.querySelectorAll('#panels .panel').length")
    page.open(path)
    assert page.evaluate("document.getElementById('slider').value") == "0"
    assert page.evaluate("document.querySelectorAll('#panels .panel').length") == columns


def reads_itself_anew(page, path):
    """While the run goes on; what the reader has set stays."""
    text, going = runs.read(path), path.replace("report.html", "going.html")
    assert '"running":false,"reload":0' in text
    with open(going, "w", encoding="utf-8") as file:
        file.write(text.replace('"running":false,"reload":0', '"running":true,"reload":1'))
    page.open(going)
    assert not page.evaluate("document.getElementById('running').hidden")
    page.evaluate("document.getElementById('slider').focus()")
    page.key("Home")
    page.wait_for_load(page.loads)
    page.until("document.documentElement.dataset.ready === 'yes'")
    assert page.evaluate("document.getElementById('slider').value") == "0"
    page.open(path)
    page.requests = [url for url in page.requests if not url.endswith("/going.html")]


with runs.Scratch() as scratch, Browser() as browser:
    case = runs.LID.replace("a small stagnant lid", json.dumps(TITLE, ensure_ascii=False)[1:-1])
    short = runs.settings(march__most_steps=60, output__snapshot_every=4e-4, output__report="true")
    runs.expect(runs.run("march", scratch.write("case.toml", case), "--into", scratch.path("run"), *short), runs.DONE)
    report = scratch.path("run", "report.html")
    assert os.path.getsize(report) < 3e6
    browser.width(1200)
    for check in (opens, slider, field_values, cursor, zoom, logarithmic, themes, narrow, comes_back, reads_itself_anew):
        check(browser, report)
        browser.expect_no_errors()
        print(f"{check.__name__}: fine", flush=True)
    browser.expect_no_network(report)
