"""What the README's table of accuracy rests on, as it comes out now: `python tests/benchmarks/accuracy.py`.

Radiance and light by wavelength as shares, light of the sky by factors, chromaticities and angles as they are. Takes
as long as `skychart verify`.
"""

from collections.abc import Callable

from skychart.checks import Check, run_checks

# Row of the table, start of the keys it rests on, how a difference is written.
ROWS: tuple[tuple[str, str, Callable[[float], str]], ...] = (
    ("Natraj, Li & Yung 2009, radiance, rms", "natraj2009-rms-I-tau", lambda off: f"{100 * off:.2f} %"),
    ("the same, degree of polarisation", "natraj2009-polarisation", lambda off: f"{off:.4f}"),
    ("the same, neutral points", "neutral-point-all", lambda off: f"{off:.2f}°"),
    ("Monte Carlo on the sphere, radiance, rms", "sphere-I-sun", lambda off: f"{100 * off:.2f} %"),
    ("Bucholtz 1995", "rayleigh-bucholtz1995", lambda off: f"{100 * off:.2f} %"),
    ("Bodhaine et al. 1999", "rayleigh-bodhaine1999", lambda off: f"{100 * off:.4f} %"),
    ("laboratories, ozone", "ozone-b", lambda off: f"{100 * off:.1f} %"),
    ("laboratories, ozone (laser lines)", "ozone-laser", lambda off: f"{100 * off:.1f} %"),
    ("Coddington et al. 2023, sunlight", "sun-tsis-illuminance", lambda off: f"{100 * off:.3f} %"),
    ("US Naval Observatory, illuminance", "illuminance-usno1987-clear-sun", lambda off: f"x {10**off:.2f}"),
    ("Koomen et al. 1952, zenith", "zenith-koomen1952-", lambda off: f"x {10**off:.2f}"),
    ("daylight locus, y", "daylight-locus-", lambda off: f"{off:.4f}"),
)


def line(name: str, start: str, checks: list[Check], written: Callable[[float], str]) -> str:
    """A row: every difference behind the end of its key."""
    found = [f"{check.key.removeprefix(start)} {written(check.difference)}".strip() for check in checks]
    return f"{name}:\n    " + ", ".join(found)


def main() -> None:
    """Print each row with all its differences."""
    checks = [check for check in run_checks() if not check.key.endswith("-rate")]
    for name, start, written in ROWS:
        own = [check for check in checks if check.key.startswith(start)]
        assert own, f"no check begins with {start}"
        print(line(name, start, own, written))


if __name__ == "__main__":
    main()
