"""How far each gas moves the colour of the direct sun at air mass 10: `python tests/benchmarks/gas_colour.py`.

The design figures are those of a gas by itself on unscattered sunlight. Beside them stand what the same gas does in
the whole air, where scattering has taken the blue already, and the error made by nodes 10 nm apart.
"""

import numpy as np

from skychart.colour.chromaticity import uv_prime
from skychart.colour.integrate import tristimulus_matrix
from skychart.sky.air import column_of_layers, rayleigh_cross_section, standard_air
from skychart.sky.gases import (
    no2_cross_section,
    no2_layers,
    o2_o2_coefficient,
    o2_o2_layers,
    ozone_cross_section,
    ozone_layers,
)
from skychart.sky.lines import band_transmission

AIR_MASS = 10
OZONE_DU, WATER_CM, NO2_DU = 300, 1.42, 0.2
FINE_NM = np.arange(360.0, 831.0)
NODES_NM = FINE_NM[::10]
BESIDES_OZONE = ("H2O", "O2", "O2-O2")
DESIGN = {("ozone",): 0.021, BESIDES_OZONE: 0.004}  # distance in u'v'


def transmissions(wavelength_nm: np.ndarray) -> dict[str, np.ndarray]:
    """Transmission of each constituent at air mass 10, each (wavelength,)."""
    altitude_km, density = standard_air()
    depths = {
        "molecules": column_of_layers(altitude_km, density).sum() * rayleigh_cross_section(wavelength_nm),
        "ozone": ozone_layers(altitude_km, OZONE_DU).sum() * ozone_cross_section(wavelength_nm),
        "O2-O2": o2_o2_layers(altitude_km, density).sum() * o2_o2_coefficient(wavelength_nm),
        "NO2": no2_layers(altitude_km, NO2_DU).sum() * no2_cross_section(wavelength_nm),
    }
    lines = {
        "H2O": band_transmission(wavelength_nm, AIR_MASS * WATER_CM, 0),
        "O2": band_transmission(wavelength_nm, 0, AIR_MASS),
    }
    return {name: np.exp(-AIR_MASS * depth) for name, depth in depths.items()} | lines


def moved(parts: dict[str, np.ndarray], gases: tuple[str, ...], others: tuple[str, ...], matrix: np.ndarray) -> float:
    """Distance in u'v' by which `gases` move sunlight that has passed `others`."""
    before = np.prod([parts[name] for name in others], axis=0) if others else np.ones(len(matrix))
    after = before * np.prod([parts[name] for name in gases], axis=0)
    return float(np.linalg.norm(uv_prime(after @ matrix) - uv_prime(before @ matrix)))


def main() -> None:
    """Print a line for each gas and for the three that the design names together."""
    fine, nodes = transmissions(FINE_NM), transmissions(NODES_NM)
    fine_matrix, node_matrix = tristimulus_matrix(FINE_NM), tristimulus_matrix(NODES_NM)
    print(f"Direct sun at air mass {AIR_MASS}: {OZONE_DU} DU ozone, {WATER_CM} cm water, {NO2_DU} DU NO2.")
    print("Distances in u'v':")
    print(f"{'gas':<16}{'by itself':>10}{'design':>8}{'ratio':>7}{'in whole air':>14}{'10 nm nodes':>13}")
    for gases in (("ozone",), BESIDES_OZONE, ("H2O",), ("O2",), ("O2-O2",), ("NO2",)):
        others = tuple(name for name in fine if name not in gases and name != "NO2")
        alone = moved(fine, gases, (), fine_matrix)
        figure = f"{DESIGN[gases]:8.3f}{alone / DESIGN[gases]:7.2f}" if gases in DESIGN else f"{'-':>8}{'-':>7}"
        whole, at_nodes = moved(fine, gases, others, fine_matrix), moved(nodes, gases, others, node_matrix)
        print(f"{' + '.join(gases):<16}{alone:10.4f}{figure}{whole:14.4f}{at_nodes:13.4f}")


if __name__ == "__main__":
    main()
