"""What the supply air is asked for: a highest dew point, and a dry bulb or a band of them."""

from __future__ import annotations

from dataclasses import dataclass

import numpy as np
from numpy.typing import NDArray

from estimator import moist_air
from estimator.airstream.state import Request, State
from estimator.errors import SchemeError
from estimator.settings import Setpoint, Settings, setting

__all__ = ["Supply", "request"]


@dataclass(frozen=True, kw_only=True)
class Supply(Settings):
    """Targets of the supply air, judged after fan heat."""

    dew_point: Setpoint = setting(
        "dew point",
        least=-40.0,
        most=30.0,
        schedulable=True,
        doc="highest dew point of the supply air (frost point below 0.01 degC)",
        example="11 degC",
    )
    low: Setpoint | None = setting(
        "temperature",
        least=-20.0,
        most=50.0,
        schedulable=True,
        default=None,
        doc="supply air is heated up to this dry bulb; absent: it is not heated",
        example="18 degC",
    )
    high: Setpoint | None = setting(
        "temperature",
        least=-20.0,
        most=50.0,
        schedulable=True,
        default=None,
        doc="supply air is cooled down to this dry bulb; absent: it is cooled for its dew point only",
        example="22 degC",
    )

    def __post_init__(self) -> None:
        super().__post_init__()
        if self.low is None or self.high is None:
            return
        lows, highs = self.low.values, self.high.values
        if self.low.outdoor == self.high.outdoor and len(lows) == len(highs):
            pairs = list(zip(lows, highs, strict=True))
        elif len(lows) == 1 or len(highs) == 1:
            pairs = [(low, high) for low in lows for high in highs]
        else:
            # one follows the month and the other the outdoor air: judged hour by hour in ``request``
            return
        if any(np.any(np.greater(low, high)) for low, high in pairs):
            raise SchemeError(
                "the low dry bulb lies above the high one", where="dry_bulb", allowed="low at most high"
            )


def request(supply: Supply, month: NDArray[np.int64], outdoor: State) -> Request:
    """The targets of every hour, and the humidity ratio that the dew point means at the hour's pressure."""
    t_out = outdoor.dry_bulb
    dew_point = supply.dew_point.at(month, t_out)
    low, high = (None if s is None else s.at(month, t_out) for s in (supply.low, supply.high))
    if low is not None and high is not None and np.any(np.asarray(low) > np.asarray(high)):
        raise SchemeError(
            "the low dry bulb lies above the high one in some hours of this weather",
            where="supply.dry_bulb",
            allowed="low at most high in every hour",
        )
    return Request(
        dew_point=dew_point,
        humidity_ratio=moist_air.saturation_humidity_ratio(dew_point, outdoor.pressure),
        low=low,
        high=high,
    )
