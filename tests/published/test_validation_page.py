"""The validation page says what the checks of this run have compared."""

from __future__ import annotations

import pytest
from generators.markdown import DOCS
from generators.validation_page import differences
from published.checks import RECORDED


@pytest.mark.usefixtures("whole_folder")
def test_the_page_is_up_to_date() -> None:
    """Texts word for word; a figure may have moved by a tenth of the tolerance it is held to, which is what
    other versions of the libraries do.
    """
    page = (DOCS / "validation.md").read_text(encoding="utf-8")
    stale = differences(RECORDED, page)
    assert not stale, "run python tests/generators/make_docs.py validation\n" + "\n".join(stale[:20])
