"""Spectra as IES TM-27 XML, written by colour-science.

Source: ANSI/IES TM-27-14, Electronic Transfer of Spectral Data (2014): header, quantity, and a value for each
wavelength, per nanometre. What is not given has no element; colour-science would write the word None.
"""

from skychart.charts.curves import Spectra, Spectrum
from skychart.charts.numbers import significant
from skychart.export.cgats import FIXED_DATE
from skychart.export.files import bytes_written
from skychart.library import colour_science

_QUANTITIES = {"W m⁻² sr⁻¹ nm⁻¹": "radiance", "W m⁻² nm⁻¹": "irradiance"}
_DIGITS = 5


def spectra_tm27(spectra: Spectra, software: str, description: str) -> dict[str, bytes]:
    """A file for each curve, by the curve's key; `description` says which sky they are of."""
    return {curve.key: _tm27(spectra, curve, software, description) for curve in spectra.curves}


def _tm27(spectra: Spectra, curve: Spectrum, software: str, description: str) -> bytes:
    colour = colour_science()
    quantity = _QUANTITIES[curve.unit]
    unit = "W/(m2 sr nm)" if quantity == "radiance" else "W/(m2 nm), plane facing the sun"
    title = curve.title.replace("°", " deg")
    step = spectra.wavelength_nm[1] - spectra.wavelength_nm[0]
    distribution = colour.SpectralDistribution_IESTM2714(
        header=colour.io.tm2714.Header_IESTM2714(
            description=f"{title}; {description}",
            document_creator=software,
            document_creation_date=FIXED_DATE,
            comments=f"Absolute, in {unit}; computed. The date is fixed, so that equal builds give equal files.",
        ),
        spectral_quantity=quantity,
        bandwidth_FWHM=float(step),
        bandwidth_corrected=False,
    )
    distribution.wavelengths = spectra.wavelength_nm
    distribution.values = [float(significant(float(value), _DIGITS)) for value in curve.absolute]

    def write(path: str) -> None:
        distribution.path = path
        distribution.write()

    lines = bytes_written(write, ".spdx").decode("ascii").splitlines()
    return "".join(f"{line}\n" for line in lines if ">None<" not in line).encode("ascii")
