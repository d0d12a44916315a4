"""The sample weather as a list."""

from __future__ import annotations

from collections.abc import Iterable

from estimator.report.text import page, paragraph, table
from estimator.samples import Sample

__all__ = ["sample_list"]


def sample_list(samples: Iterable[Sample]) -> str:
    """Name, place and kind of climate of every sample."""
    rows = [[sample.name, sample.site, sample.stands_for] for sample in samples]
    return page(
        [
            *paragraph(
                "Sample years, all synthetic and of invented places: to try the program with, and for no "
                "decision about a building. A name may stand wherever a weather file is asked for.",
                "",
            ),
            "",
            *(table(rows, "lll") if rows else paragraph("None came with this installation.")),
        ]
    )
