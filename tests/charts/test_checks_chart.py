"""The methods page shows every check with the digits its tolerance deserves."""

from skychart.charts.checks import methods

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
        *({field for field, _ in table.lines} for table in page.provenance)
    )
    assert len(page.provenance) == 4


def test_light_rows_stand_beside_the_published_curve(found):
    """Ratio of computed to published for every sun of the build."""
    page = methods(fake_checks(), found)
    assert len(page.light_rows) == len(found.solar_elevation_deg)
    assert all(row.published != "—" for row in page.light_rows)
