"""The ``check`` fixture; and the test of the page of all checks, which comes after the last of them."""

from __future__ import annotations

import pytest
from published.checks import Recorder

_PAGE = "test_validation_page.py"
_DESELECTED = pytest.StashKey[bool]()


@pytest.fixture
def check(request: pytest.FixtureRequest) -> Recorder:
    """Compare figures and record them for the validation page."""
    return Recorder(request.function)


@pytest.hookimpl(trylast=True)
def pytest_collection_modifyitems(items: list[pytest.Item]) -> None:
    """The page's own test comes after all that it tells of."""
    items.sort(key=lambda item: item.path.name == _PAGE)


def pytest_deselected(items: list[pytest.Item]) -> None:
    """Remember that only a part of the checks runs."""
    if items:
        items[0].config.stash[_DESELECTED] = True


@pytest.fixture
def whole_folder(request: pytest.FixtureRequest) -> None:
    """Skip where this process does not run every check of the folder."""
    config = request.config
    wanted = {path for path in request.path.parent.glob("test_*.py") if path.name != _PAGE}
    part = (
        config.stash.get(_DESELECTED, False)
        or hasattr(config, "workerinput")
        or any("::" in argument for argument in config.args)
        or not wanted <= {item.path for item in request.session.items}
    )
    if part:
        pytest.skip("only a part of the published checks runs in this process")
