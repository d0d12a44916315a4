"""For all tests: the same generated cases in every continuous-integration run, fresh ones elsewhere."""

from __future__ import annotations

import os

from hypothesis import settings

settings.register_profile("ci", derandomize=True, deadline=None)
if os.environ.get("CI"):
    settings.load_profile("ci")
