"""The light sheet as JSON, whole and for the sheet of one sun; the CSV comes from its table."""

import json
from typing import Any

from skychart.charts.harmonics import HARMONICS
from skychart.charts.light import PARTS, LightSheet, SunLight
from skychart.charts.planes import PLANES
from skychart.export.tables import plain

CONVENTION = (
    "sky and ground as the sum of coefficient times Y over the nine, for light whose white of 1 cd/m2 is 1, 1, 1; the "
    "integrals of light times Y, moved a little so that the six planes come out right; unit vector: x toward the sun's "
    "azimuth, y to the side of relative azimuth 90, z up; Y real, orthonormal over the sphere, without alternating "
    "sign: "
    + ", ".join(f"{term.name} {term.factor:.6f}({term.polynomial})" for term in HARMONICS)
    + "; a plane receives the sum of A times coefficient times Y(normal), A = pi, 2 pi/3, pi/4 for degree 0, 1, 2 "
    "(Ramamoorthi and Hanrahan 2001, doi:10.1145/383259.383317)"
)
SHORT_CONVENTION = (
    ", ".join(term.name for term in HARMONICS)
    + "; x toward the sun's azimuth, y at azimuth 90, z up; real, orthonormal; "
    "doi:10.1145/383259.383317; written out in light.json"
)
REMARKS = (
    "part: sun = the beam alone, shadow = sky and ground without the sun, both = all; each on the named plane, lx; "
    "without a seen sun the plane facing it is the wall toward it",
    "linear RGB is absolute: white light of 1 lx is 1, 1, 1; acescg is adapted from D65 (Bradford); cct_k and duv are "
    "empty where they have no meaning",
)


def light_json(about: dict[str, Any], sheet: LightSheet) -> bytes:
    """All suns of a light sheet; RGB on the planes is left to the CSV file and to the sheets of the suns."""
    suns = [{key: value for key, value in light_content(light).items() if key != "rgb"} for light in sheet.suns]
    light = "; ".join(REMARKS) + "; rgb on planes: in the CSV file and in the JSON file of each sun"
    content = {"about": about | _axes() | {"light": light, "coefficient_convention": CONVENTION}, "suns": suns}
    text = json.dumps(content, ensure_ascii=False, allow_nan=False, separators=(",", ":"))
    return (text + "\n").encode("utf-8")


def sheet_light(light: SunLight) -> dict[str, Any]:
    """The light of one sun as the JSON file of its elevation sheet has it."""
    return _axes() | {"coefficient_convention": SHORT_CONVENTION} | light_content(light)


def light_content(light: SunLight) -> dict[str, Any]:
    """The light of one sun as plain values."""
    beam = light.beam
    found: dict[str, Any] = plain(
        {
            "solar_elevation_deg": light.solar_elevation_deg,
            "illuminance_lx": light.illuminance_lx,
            "xy": light.xy,
            "cct_k": light.cct_k,
            "duv": light.duv,
            "rgb": light.rgb,
            "ground_share": light.ground_share,
            "sun": {
                "illuminance_lx": beam.illuminance_lx,
                "xy": beam.xy,
                "cct_k": beam.cct_k,
                "duv": beam.duv,
                "rgb_of_luminance_1": beam.colour,
                "disc_luminance_cd_m2": beam.disc_luminance_cd_m2,
                "disc_sr": beam.disc_sr,
            },
            "coefficients": light.coefficients,
            "coefficient_error": light.coefficient_error,
            "lit_to_shadow_stops": {"facing": light.facing_stops, "level": light.level_stops},
            "ev100": {"white_card": light.card_ev100, "grey_card": light.grey_ev100},
        }
    )
    return found


def _axes() -> dict[str, Any]:
    """What the arrays of `light_content` are over."""
    return {
        "planes": [plane.key for plane in PLANES],
        "parts": [key for key, _ in PARTS],
        "axes": "arrays are plane, part, channel; coefficients are harmonic, channel",
    }
