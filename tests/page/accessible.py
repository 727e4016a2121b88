"""The page of `lidwright report` before the axe-core checker, light and dark: no violation. Skipped without Chromium, npm or
a network. axe-core comes by npm into a scratch folder; nothing of it stays."""

import json
import os
import shutil
import subprocess
import sys

sys.path.insert(0, os.path.join(os.path.dirname(os.path.abspath(__file__)), "..", "support", "python"))
import browser
import runs

VERSION = "axe-core@4.10.2"


def checker(folder):
    """The text of axe.min.js."""
    if not shutil.which("npm"):
        runs.skip("npm is not installed: axe-core cannot be had")
    made = subprocess.run(
        ["npm", "pack", VERSION, "--prefer-offline", "--silent", "--fetch-retries=0", "--fetch-timeout=20000"],
        cwd=folder, stdout=subprocess.PIPE, stderr=subprocess.DEVNULL, text=True,
    )
    if made.returncode != 0:
        runs.skip(f"npm cannot fetch {VERSION} (no network?)")
    subprocess.run(["tar", "xzf", made.stdout.split()[-1], "package/axe.min.js"], cwd=folder, check=True)
    return runs.read(os.path.join(folder, "package", "axe.min.js"))


def violations(page):
    found = page.evaluate("axe.run(document, { resultTypes: ['violations'] }).then((r) => JSON.stringify(r.violations))")
    return [f"{v['id']}: {v['help']}: {[n['target'] for n in v['nodes']][:3]} {v['nodes'][0].get('failureSummary')}" for v in json.loads(found)]


browser.program()
with runs.Scratch() as scratch:
    axe = checker(scratch.name)
    short = runs.settings(march__most_steps=40, output__snapshot_every=4e-4, output__report="true")
    runs.expect(runs.run("march", scratch.write("case.toml", runs.LID), "--into", scratch.path("run"), *short), runs.DONE)
    with browser.Browser() as page:
        page.width(1200)
        page.open(scratch.path("run", "report.html"))
        page.send("Page.setBypassCSP", enabled=True)
        page.evaluate(axe + "; true")
        page.evaluate("document.querySelectorAll('details').forEach((d) => { d.open = true; })")
        for scheme in ("light", "dark"):
            page.prefers(scheme)
            page.until(f"document.documentElement.dataset.theme === '{scheme}'")
            bad = violations(page)
            assert not bad, "\n".join([scheme, *bad])
            print(f"{scheme}: fine", flush=True)
