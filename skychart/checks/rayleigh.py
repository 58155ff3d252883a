"""Scattering cross-section of air and vertical optical depth of the molecular atmosphere.

Sources: Bucholtz 1995, Bodhaine et al. 1999, Hansen & Travis 1974, Nicolet 1984; see the tables.
"""

from skychart.checks.check import Check
from skychart.data.tables import load_table
from skychart.sky.air import column_of_layers, rayleigh_cross_section, standard_air

TOPIC = "Scattering by air molecules"

_BUCHOLTZ = "Bucholtz 1995, Appl. Opt. 34, 2765, Table 2 (machine-readable copy, cross-checked)"
_BODHAINE = (
    "Bodhaine, Wood, Dutton & Slusser 1999, J. Atmos. Oceanic Technol. 16, 1854, {} (derived here from the published "
    "formula; the printed table was not found)"
)
_BODHAINE_METHOD = (
    "Bodhaine, Wood, Dutton & Slusser 1999, J. Atmos. Oceanic Technol. 16, 1854, full method (regression value from "
    "the unit test of another public code)"
)
_HANSEN = "Hansen & Travis 1974, Space Sci. Rev. 16, 527 (derived here from the published formula)"
_NICOLET = "Nicolet 1984, Planet. Space Sci. 32, 1467, fit to Bates 1984 (formula read in an abstract, one copy)"

# Not near 550 nm, where its two branches meet: there the fit itself jumps by 1.3 %, against the 0.5 % stated.
_NICOLET_NM = (400, 700)

_FULL_METHOD_CM2 = {400: 1.6738176054e-26, 550: 4.5105103964e-27}


def checks() -> tuple[Check, ...]:
    """Cross-sections, their ratio between 400 and 700 nm, and optical depths."""
    return (*_bucholtz(), *_full_method(), *_nicolet(), *_ratio(), *_optical_depths())


def _bucholtz() -> list[Check]:
    columns = load_table("checks/published_rayleigh_bucholtz1995").columns
    published = dict(zip(columns["wavelength_nm"], columns["cross_section_cm2"], strict=True))
    return [
        _cross_section(
            f"rayleigh-bucholtz1995-{nm}",
            nm,
            published[nm],
            _BUCHOLTZ,
            0.002,
            "four printed digits, and 0.2 % between this paper's dispersion formula and that of Bodhaine et al.",
        )
        for nm in (400, 450, 500, 550, 600, 700)
    ]


def _full_method() -> list[Check]:
    return [
        _cross_section(
            f"rayleigh-bodhaine1999-{nm}",
            nm,
            published,
            _BODHAINE_METHOD,
            1e-4,
            "the same method: only the constants of nature and the carbon dioxide content may differ",
        )
        for nm, published in _FULL_METHOD_CM2.items()
    ]


def _nicolet() -> list[Check]:
    return [
        _cross_section(
            f"rayleigh-nicolet1984-{nm}", nm, _nicolet_cross_section_cm2(nm / 1000), _NICOLET, 0.005, "stated: 0.5 %"
        )
        for nm in _NICOLET_NM
    ]


def _cross_section(
    key: str, wavelength_nm: float, published_cm2: float, source: str, tolerance: float, reason: str
) -> Check:
    return Check(
        key=key,
        topic=TOPIC,
        quantity="Scattering cross-section of air",
        conditions=f"{wavelength_nm:.0f} nm, one molecule",
        source=source,
        published=float(published_cm2),
        computed=float(rayleigh_cross_section(wavelength_nm)) * 1e4,
        tolerance=tolerance,
        tolerance_reason=reason,
        unit="cm²",
        relative=True,
    )


def _nicolet_cross_section_cm2(wavelength_um: float) -> float:
    exponent = 0.389 * wavelength_um + 0.09426 / wavelength_um - 0.3228 if wavelength_um < 0.55 else 0.04
    return 4.02e-28 / wavelength_um ** (4 + exponent)


def _ratio() -> list[Check]:
    return [
        Check(
            key="rayleigh-ratio-400-700",
            topic=TOPIC,
            quantity="Scattering at 400 nm over scattering at 700 nm",
            conditions="rule of thumb λ⁻⁴, that is (700/400)⁴",
            source="common practice, no source",
            published=(700 / 400) ** 4,
            computed=float(rayleigh_cross_section(400) / rayleigh_cross_section(700)),
            tolerance=0.06,
            tolerance_reason="the rule leaves out dispersion and depolarisation, which add 5 to 6 % (Bucholtz: 9.888)",
            unit="1",
            relative=True,
        )
    ]


def _optical_depths() -> list[Check]:
    columns = load_table("checks/published_rayleigh_depth").columns
    column = float(column_of_layers(*standard_air()).sum())
    found = []
    for name, source, tolerance, reason in (
        ("bodhaine1999", _BODHAINE.format("equation 30"), 0.002, "0.2 %: gravity and the column of air"),
        ("hansen1974", _HANSEN, 0.005, "0.5 %: the formulas differ by 0.3 %, gravity and the column of air by 0.2 %"),
    ):
        published = dict(zip(columns["wavelength_nm"], columns[f"{name}_optical_depth"], strict=True))
        found += [
            Check(
                key=f"rayleigh-depth-{name}-{nm}",
                topic=TOPIC,
                quantity="Vertical optical depth of the molecular atmosphere",
                conditions=f"{nm} nm, sea level, 1013.25 hPa",
                source=source,
                published=float(published[nm]),
                computed=column * float(rayleigh_cross_section(nm)),
                tolerance=tolerance,
                tolerance_reason=reason,
                unit="1",
                relative=True,
            )
            for nm in (400, 550)
        ]
    return found
