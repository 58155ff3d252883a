"""How quick the reader is in Chromium: `python tests/benchmarks/reader_speed.py SITE`.

Time from opening the page from disk until the first reading stands, with the processor slowed to a quarter, and time
of a redraw at full speed: a new sun, another exposure, another direction. Ratios are measured value over budget.
"""

import shutil
import sys
from pathlib import Path

from playwright.sync_api import sync_playwright

OPENING_BUDGET_MS = 2000.0
REDRAW_BUDGET_MS = 50.0
SLOWED = 4
RUNS = 15
REDRAW = """async ([name, values]) => {
  const frame = () => new Promise((resolve) => requestAnimationFrame(resolve));
  const input = document.getElementById(name);
  const times = [];
  for (const value of values) {
    await frame();
    await frame();
    const begun = performance.now();
    input.value = value;
    input.dispatchEvent(new Event("input"));
    await frame(); // the page draws in this frame, before this line goes on
    await new Promise((resolve) => setTimeout(resolve));
    times.push(performance.now() - begun);
  }
  return times;
}"""


def main() -> None:
    """Print the median and the longest of each, beside the budget."""
    page_address = (Path(sys.argv[1]) / "reader.html").resolve().as_uri()
    path = shutil.which("chromium")
    with sync_playwright() as driver:
        browser = driver.chromium.launch(executable_path=path, args=["--no-sandbox"])
        page = browser.new_page(viewport={"width": 1440, "height": 1000})
        slow = page.context.new_cdp_session(page)
        slow.send("Emulation.setCPUThrottlingRate", {"rate": SLOWED})
        opening = []
        for run in range(5):
            page.goto("about:blank")
            page.goto(f"{page_address}#sun={10 + run}", wait_until="commit")
            page.wait_for_function("document.querySelector('#numbers dd')", polling="raf")
            opening.append(page.evaluate("performance.now()"))
        slow.send("Emulation.setCPUThrottlingRate", {"rate": 1})
        found = {
            "sun": page.evaluate(REDRAW, ["sun", [20 + 2.3 * run for run in range(RUNS)]]),
            "exposure": page.evaluate(REDRAW, ["stops", [0.1 * run - 1 for run in range(RUNS)]]),
            "direction": page.evaluate(REDRAW, ["elevation", [5 * run for run in range(RUNS)]]),
        }
        browser.close()
    print(f"{'':<36}{'median':>9}{'longest':>9}{'budget':>9}{'ratio':>7}")
    rows = [(f"usable, processor at 1/{SLOWED}", opening, OPENING_BUDGET_MS)]
    rows += [(f"redraw, new {name}", times, REDRAW_BUDGET_MS) for name, times in found.items()]
    for title, times, budget in rows:
        median = sorted(times)[len(times) // 2]
        print(f"{title:<36}{median:>6.0f} ms{max(times):>6.0f} ms{budget:>6.0f} ms{median / budget:>7.2f}")


if __name__ == "__main__":
    main()
