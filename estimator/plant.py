"""From duties to bought energy: a constant coefficient of performance and constant efficiencies."""

from __future__ import annotations

from dataclasses import dataclass
from typing import Any, Final

from estimator.settings import Settings, setting

__all__ = ["CARRIERS", "CARRIER_OF", "PURPOSES", "USUAL_EFFICIENCY", "Plant", "bought"]

#: What is bought, and what for; the rows of the energy table.
CARRIERS: Final = ("electricity", "fuel", "heat")
PURPOSES: Final = ("cooling", "reheat", "outdoor-air heating", "preheat", "fans", "pumps")

#: Sources of bought heat, and the carrier each draws on.
CARRIER_OF: Final = {"electric": "electricity", "boiler": "fuel", "district": "heat"}

#: Delivered heat over what is bought, where a scheme does not say: common practice (a non-condensing
#: boiler in seasonal use; electric and district heat as delivered).
USUAL_EFFICIENCY: Final = {"electric": 1.0, "boiler": 0.85, "district": 1.0}


@dataclass(frozen=True, kw_only=True)
class Plant(Settings):
    """The cooling plant."""

    cooling_cop: float | None = setting(
        "coefficient of performance",
        least=0.0,
        above=True,
        default=None,
        doc="cooling delivered over electricity, over the year and for the whole plant; absent: the "
        "electricity of cooling, and every sum that needs it, is not stated",
        example="3.2",
    )


def bought(delivered: Any, efficiency: Any) -> Any:
    """Energy bought for ``delivered``, in the same unit; None where the efficiency is not known."""
    return None if efficiency is None else delivered / efficiency
