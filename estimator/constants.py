"""Physical constants and conventions, each with its source.

Nothing here is a setting: what a user may choose is a default of a scheme (see ``settings``).
"""

from __future__ import annotations

from typing import Final

#: Celsius zero on the kelvin scale, K (definition).
ZERO_CELSIUS: Final = 273.15

#: Temperature at which saturation changes from ice to liquid water, degC (triple point of water).
TRIPLE_POINT: Final = 0.01

#: Mole mass of water over that of dry air, ASHRAE Handbook Fundamentals 2021, ch. 1, eq. 20.
MOLE_MASS_RATIO: Final = 0.621945

#: Gas constant of dry air, J/(kg K), ASHRAE Handbook Fundamentals 2021, ch. 1, eq. 1.
GAS_CONSTANT_DRY_AIR: Final = 287.042

#: Standard atmosphere at sea level, Pa (definition).
STANDARD_PRESSURE: Final = 101_325.0

#: Density to which a standard airflow refers, kg dry air per m3; common practice
#: (dry air at 20 degC and 101.325 kPa), inch-pound practice is 0.075 lb/ft3 = 1.2014 kg/m3.
STANDARD_DENSITY: Final = 1.204

#: An hour is unmet when the supply misses its target by more than this, K (convention of this tool).
UNMET_TOLERANCE: Final = 0.1

#: Largest residual of a heat or water balance, as a share of what passes through.
BALANCE_TOLERANCE: Final = 1e-9

#: Largest error of an inverse of a moist-air property, K.
TEMPERATURE_TOLERANCE: Final = 1e-6

#: Heat below this is what root finding leaves over, kJ per kg dry air: a millionth of a kelvin.
NEGLIGIBLE_HEAT: Final = 1e-6

SECONDS_PER_HOUR: Final = 3600.0
