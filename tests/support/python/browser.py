"""A headless Chromium for the tests of the page, spoken to over its debugging pipe: no driver, no port, no package.

    with Browser() as page:
        page.open("/path/report.html")
        page.evaluate("document.title")

A test is skipped where there is no Chromium.
"""

import json
import os
import select
import shutil
import subprocess
import tempfile
import time

import runs

FLAGS = [
    "--headless",
    "--no-sandbox",
    "--disable-gpu",
    "--no-first-run",
    "--disable-background-networking",
    "--disable-component-update",
    "--disable-sync",
    "--hide-scrollbars",
    "--remote-debugging-pipe",
]


def program():
    found = shutil.which("chromium", path="/usr/bin") or shutil.which("chromium")
    return found or runs.skip("chromium is not installed (apt install chromium): the page is not looked at in a browser")


class Browser:
    """One page. What went wrong in it is in `errors`, what it asked for in `requests`."""

    def __init__(self):
        self.profile = tempfile.mkdtemp(prefix="lidwright_browser_")
        self.errors, self.requests, self.rest, self.number = [], [], b"", 0
        self.loads = 0
        commands, self.to_browser = os.pipe()
        self.from_browser, answers = os.pipe()

        def wire():  # Chromium reads from 3 and writes to 4
            os.dup2(os.dup(commands), 3)
            os.dup2(os.dup(answers), 4)

        self.process = subprocess.Popen(
            [program(), *FLAGS, f"--user-data-dir={self.profile}", "about:blank"],
            preexec_fn=wire,
            close_fds=False,
            stdout=subprocess.DEVNULL,
            stderr=subprocess.DEVNULL,
        )
        os.close(commands)
        os.close(answers)
        self.session = None
        target = self.send("Target.createTarget", url="about:blank")["targetId"]
        self.session = self.send("Target.attachToTarget", targetId=target, flatten=True)["sessionId"]
        for domain in ("Page", "Runtime", "Log", "Network"):
            self.send(domain + ".enable")

    def __enter__(self):
        return self

    def __exit__(self, *_):
        self.process.kill()
        self.process.wait()
        os.close(self.to_browser)
        os.close(self.from_browser)
        shutil.rmtree(self.profile, ignore_errors=True)

    def send(self, method, **parameters):
        self.number += 1
        message = {"id": self.number, "method": method, "params": parameters}
        if self.session:
            message["sessionId"] = self.session
        os.write(self.to_browser, json.dumps(message).encode() + b"\0")
        wanted = self.number
        while True:
            answer = self.receive(60)
            assert answer, f"no answer to {method}"
            if answer.get("id") == wanted:
                assert "error" not in answer, (method, answer["error"])
                return answer["result"]

    def receive(self, seconds):
        """The next message, or nothing when none comes in time."""
        end = time.monotonic() + seconds
        while b"\0" not in self.rest:
            left = end - time.monotonic()
            if left <= 0 or not select.select([self.from_browser], [], [], left)[0]:
                return None
            part = os.read(self.from_browser, 1 << 20)
            assert part, "chromium ended"
            self.rest += part
        text, self.rest = self.rest.split(b"\0", 1)
        message = json.loads(text)
        self.note(message)
        return message

    def note(self, message):
        method, about = message.get("method"), message.get("params", {})
        if method == "Runtime.exceptionThrown":
            self.errors.append(about["exceptionDetails"])
        elif method == "Runtime.consoleAPICalled" and about["type"] in ("error", "warning", "assert"):
            self.errors.append(about)
        elif method == "Log.entryAdded" and about["entry"]["level"] in ("error", "warning"):
            self.errors.append(about["entry"])
        elif method == "Network.requestWillBeSent":
            self.requests.append(about["request"]["url"])
        elif method == "Page.loadEventFired":
            self.loads += 1

    def open(self, path):
        before = self.loads
        self.send("Page.navigate", url="file://" + os.path.abspath(path))
        self.wait_for_load(before)
        self.until("document.documentElement.dataset.ready === 'yes'")

    def wait_for_load(self, before, seconds=30):
        end = time.monotonic() + seconds
        while self.loads == before:
            assert time.monotonic() < end, "the page is not loaded"
            self.receive(0.2)

    def evaluate(self, expression):
        result = self.send("Runtime.evaluate", expression=expression, returnByValue=True, awaitPromise=True)
        assert "exceptionDetails" not in result, (expression, result["exceptionDetails"])
        return result["result"].get("value")

    def until(self, expression, seconds=20):
        end = time.monotonic() + seconds
        while not self.evaluate(expression):
            assert time.monotonic() < end, f"never true: {expression}"
            time.sleep(0.03)

    def width(self, pixels, height=900):
        self.send("Emulation.setDeviceMetricsOverride", width=pixels, height=height, deviceScaleFactor=1, mobile=False)

    def prefers(self, scheme, media=""):
        self.send("Emulation.setEmulatedMedia", media=media, features=[{"name": "prefers-color-scheme", "value": scheme}])

    def place(self, selector, across=0.5, down=0.5):
        """A point of an element, scrolled into view and drawn there: until then the mouse finds what stood there before."""
        return self.evaluate(
            f"(async () => {{ const e = document.querySelector({json.dumps(selector)});"
            "e.scrollIntoView({ block: 'center', behavior: 'instant' });"
            "for (let k = 0; k < 2; ++k) await new Promise(requestAnimationFrame);"
            f"const b = e.getBoundingClientRect(); return [b.left + {across} * b.width, b.top + {down} * b.height]; }})()"
        )

    def mouse(self, kind, point, buttons=0, clicks=0):
        self.send(
            "Input.dispatchMouseEvent", type=kind, x=point[0], y=point[1], button="left" if buttons or clicks else "none",
            buttons=buttons, clickCount=clicks,
        )

    def move(self, selector, across=0.5, down=0.5):
        point = self.place(selector, across, down)
        self.mouse("mouseMoved", [point[0] - 3, point[1]])
        self.mouse("mouseMoved", point)
        return point

    def click(self, selector, across=0.5, down=0.5):
        point = self.move(selector, across, down)
        self.mouse("mousePressed", point, buttons=1, clicks=1)
        self.mouse("mouseReleased", point, clicks=1)

    def drag(self, selector, start, end):
        point, to = self.place(selector, start), self.place(selector, end)
        self.mouse("mouseMoved", point)
        self.mouse("mousePressed", point, buttons=1, clicks=1)
        for part in (0.3, 0.7, 1):
            self.mouse("mouseMoved", [point[0] + part * (to[0] - point[0]), to[1]], buttons=1)
        self.mouse("mouseReleased", to, clicks=1)

    def key(self, name):
        for kind in ("rawKeyDown", "keyUp"):
            code = {"ArrowLeft": 37, "ArrowRight": 39, "Home": 36, "End": 35}.get(name, 0)
            self.send("Input.dispatchKeyEvent", type=kind, key=name, code=name, windowsVirtualKeyCode=code)

    def expect_no_errors(self):
        assert not self.errors, self.errors

    def expect_no_network(self, path):
        """Everything asked for is the page itself or stands in it."""
        outside = [u for u in self.requests if not u.startswith("data:") and u not in ("about:blank", "file://" + os.path.abspath(path))]
        assert not outside, outside
