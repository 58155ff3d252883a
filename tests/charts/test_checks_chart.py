"""The methods page shows every check with the digits its tolerance deserves."""

import numpy as np

from skychart.charts.checks import methods
from skychart.checks.chromaticity import chain1999_temperature

from .fake_checks import fake_checks


def test_rows_topics_and_counts(found):
    """Topics keep their order; a missed check is counted and named."""
    page = methods(fake_checks(), found)
    assert (page.met, page.total) == (2, 3)
    assert [(topic.title, topic.met, len(topic.rows)) for topic in page.topics] == [("Air", 2, 2), ("Sun", 0, 1)]
    assert [row.verdict for topic in page.topics for row in topic.rows] == ["met", "met", "missed"]


def test_differences_are_written_with_their_sign(found):
    """Absolute ones to a tenth of the tolerance, relative ones in per cent, true minus."""
    air, sun = methods(fake_checks(), found).topics
    assert [(row.difference, row.tolerance) for row in air.rows] == [("+0.00001", "0.00010"), ("+1.5 %", "2.0 %")]
    assert sun.rows[0].difference == "−0.70"
    assert air.rows[0].published == "0.09730"


def test_provenance_comes_from_the_tables(found):
    """Each table that the sky is computed from names its source."""
    page = methods(fake_checks(), found)
    assert {"Source", "Quantity"} <= set.intersection(
        *({field.partition(",")[0] for field, _ in table.lines} for table in page.provenance)
    )
    assert len(page.provenance) == 11


def test_light_rows_stand_beside_the_published_curve(found):
    """Ratio of computed to published for every sun of the build."""
    page = methods(fake_checks(), found)
    assert len(page.light_rows) == len(found.solar_elevation_deg)
    assert all(row.published != "—" for row in page.light_rows)


def test_pieces_of_sky_have_a_temperature_each(found):
    """At the suns nearest to 10, 30 and 60 degrees; pieces without a temperature are left out."""
    chart = methods(fake_checks(), found).temperatures
    assert chart.air == "molecular"
    assert [sky.title for sky in chart.skies] == ["sun 10° up", "sun 45° up"]
    for sky in chart.skies:
        assert sky.cct_k.shape == sky.luminance_cd_m2.shape
        assert np.all(np.isfinite(sky.cct_k))
        assert 0 < len(sky.cct_k) <= 9 * 7


def test_fit_of_chain_dumortier_and_fontoynont_1999(found):
    """1000 cd/m² 21 182 K, 10 000 cd/m² 9348 K: evaluated elsewhere, all digits; it falls with luminance."""
    np.testing.assert_allclose(chain1999_temperature([1000, 2000, 10_000]), [21182, 15337, 9348], atol=0.5)
    assert np.isnan(chain1999_temperature(100))
    chart = methods(fake_checks(), found).temperatures
    assert np.all(np.diff(chart.published_k) < 0)
