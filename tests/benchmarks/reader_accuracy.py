"""How far the reader's numbers are from `skychart read`: `python tests/benchmarks/reader_accuracy.py [AIR ...]`.

200 random suns and directions of each atmosphere, two of five within 15° of the sun, asked from the solved sky and from
the page's own scripts in Node. Some ten seconds for molecular air, a minute for hazy air.
"""

import json
import shutil
import subprocess
import sys
import tempfile
from pathlib import Path

import numpy as np

ROOT = Path(__file__).parents[2]
sys.path.insert(0, str(ROOT))

from skychart.charts.reader import READER_SUNS_DEG, reader_sky  # noqa: E402
from skychart.charts.survey import survey  # noqa: E402
from skychart.colour.chromaticity import uv_prime  # noqa: E402
from skychart.config import named_air  # noqa: E402
from skychart.export.reader_data import reader_script  # noqa: E402
from skychart.sky.spectral import solve_spectral  # noqa: E402
from tests.js.cases import OBSERVER, directions_about, exact_answers  # noqa: E402

COUNT = 200
PROGRAM = """
const fs = require("node:fs");
const [folder, script, asked] = process.argv.slice(1);
const load = (name) => require(`${folder}/reader-${name}.js`);
const [data, sky] = [load("data"), load("sky")];
let taken;
new Function("readerReceive", fs.readFileSync(script, "utf8"))((found) => (taken = found));
const air = data.opened(taken);
const found = JSON.parse(fs.readFileSync(asked, "utf8")).map(([sun, view, azimuth]) =>
  sky.directionOf(sky.skyOf(air, sun), view, azimuth));
console.log(JSON.stringify(found));
"""


def read_by_script(script: bytes, asked: np.ndarray) -> tuple[np.ndarray, np.ndarray]:
    """XYZ and Q/I, U/I that the page's scripts read in each direction."""
    node = shutil.which("node")
    assert node, "Node is needed"
    with tempfile.TemporaryDirectory() as folder:
        files = Path(folder, "data.js"), Path(folder, "asked.json")
        files[0].write_bytes(script)
        files[1].write_text(json.dumps(asked.tolist()), encoding="utf-8")
        command = [node, "-e", PROGRAM, str(ROOT / "templates" / "static"), *map(str, files)]
        found = json.loads(subprocess.run(command, check=True, capture_output=True, text=True).stdout)
    return np.array([entry["XYZ"] for entry in found]), np.array([entry["polarised"] for entry in found])


def main() -> None:
    """A line for each atmosphere, by day and in twilight: median, nine in ten, and largest difference."""
    print(f"{'':<12}{'':<16}{'directions':>11}{'luminance %':>24}{'u′v′ × 1000':>21}{'polarisation':>14}{'file kB':>9}")
    for name in sys.argv[1:] or ("molecular", "clear", "hazy"):
        rng = np.random.default_rng(2)
        sky = solve_spectral(named_air(name))
        suns = np.round(np.where(rng.random(COUNT) < 0.5, rng.uniform(-12, 10, COUNT), rng.uniform(0, 90, COUNT)), 2)
        view, azimuth, _ = directions_about(suns, sky.apparent_elevation_deg(suns), rng)
        script = reader_script(reader_sky(sky, survey(sky, READER_SUNS_DEG, OBSERVER)))
        exact = exact_answers(sky, suns, view, azimuth)
        XYZ, polarised = read_by_script(script, exact["asked"])
        luminance = 100 * np.abs(XYZ[:, 1] / exact["XYZ"][:, 1] - 1)
        shift = 1000 * np.hypot(*(uv_prime(XYZ) - uv_prime(exact["XYZ"])).T)
        degree = np.abs(polarised - exact["polarised"]).max(axis=1)
        for title, some in (
            ("day", suns >= 0),
            ("twilight to −8°", (suns < 0) & (suns >= -8)),
            ("below −8°", suns < -8),
        ):
            texts = ["/".join(f"{v:.2f}" for v in np.quantile(x[some], (0.5, 0.9, 1))) for x in (luminance, shift)]
            print(
                f"{name:<12}{title:<16}{some.sum():>11}{texts[0]:>24}{texts[1]:>21}"
                f"{degree[some].max():>14.4f}{len(script) / 1e3:>9.0f}"
            )


if __name__ == "__main__":
    main()
