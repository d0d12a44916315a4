"""The six invented sites: where they stand and the climate each is made after.

Tables of twelve run from January to December. They are round numbers of each kind of climate from common
climatological knowledge, taken from no station. The coordinates lie in the open sea, where no town can be
mistaken for one of these.
"""
# ruff: noqa: INP001 - a neighbour of a script that is run by its path, not a package

from __future__ import annotations

from dataclasses import dataclass

__all__ = ["SITES", "Months", "Site"]

#: January to December.
Months = tuple[float, float, float, float, float, float, float, float, float, float, float, float]


@dataclass(frozen=True, kw_only=True)
class Site:
    """One site; temperatures in degC, temperature differences in K."""

    name: str
    climate: str
    seed: int
    latitude: float
    longitude: float
    #: h east of Greenwich
    utc_offset: float
    #: m
    elevation: float

    #: mean dry bulb
    dry_bulb: Months
    #: mean dew point of the air that arrives, before the nights take water out of it
    dew_point: Months
    #: mean daily range of the dry bulb that the sun brings about
    sun_range: Months
    #: standard deviation of the spells
    dry_bulb_spread: Months
    dew_point_spread: Months
    #: correlation of the two
    together: Months
    #: cloud cover around which it varies, 0..1
    cloud: Months
    #: chance of an afternoon shower, a day
    shower: Months
    #: mean wind, m/s, and where it comes from, degrees
    wind: Months
    wind_from: Months

    #: mean life of an air mass, h, and its share in the variance of the spells; the rest is slow drift
    air_mass: float
    fronts: float
    #: skewness of the spells, 0 symmetric; the long tail is the cold and the dry one
    skew: float
    #: standard deviation of what changes from hour to hour, dry bulb and dew point
    flutter: tuple[float, float]
    #: by how much the dew point falls from morning to afternoon as dry air is mixed down
    mixing: float
    #: how far a wind from the sea flattens the warm half of the day, 0 not at all
    sea_breeze: float
    #: extra cloud in the afternoon
    afternoon_cloud: float
    #: Linke turbidity of the clear sky, which its clear days keep all year
    turbidity: float
    #: standard deviation of the pressure, Pa, and half the difference winter less summer
    pressure_spread: float
    pressure_season: float

    @property
    def slug(self) -> str:
        """The file's name without its ending."""
        return self.name.lower().replace(" ", "-")


PORT_QUELLIN = Site(
    name="Port Quellin",
    climate="equatorial coast",
    seed=4101,
    latitude=2.1,
    longitude=87.4,
    utc_offset=6.0,
    elevation=6,
    dry_bulb=(26.9, 27.1, 27.5, 27.8, 28.0, 27.8, 27.5, 27.4, 27.3, 27.2, 26.9, 26.7),
    dew_point=(23.7, 23.6, 24.0, 24.5, 24.6, 24.3, 24.0, 24.0, 24.0, 24.2, 24.3, 24.0),
    sun_range=(4.9, 5.4, 5.6, 5.4, 5.1, 5.0, 5.0, 5.0, 5.1, 5.1, 4.9, 4.7),
    dry_bulb_spread=(0.7, 0.6, 0.6, 0.6, 0.6, 0.6, 0.6, 0.6, 0.6, 0.6, 0.6, 0.7),
    dew_point_spread=(0.9, 1.0, 0.9, 0.7, 0.6, 0.8, 0.9, 0.9, 0.8, 0.7, 0.6, 0.8),
    together=(0.0, 0.0, 0.1, 0.2, 0.2, 0.2, 0.2, 0.2, 0.2, 0.1, 0.1, 0.0),
    cloud=(0.66, 0.58, 0.60, 0.62, 0.60, 0.58, 0.60, 0.62, 0.64, 0.66, 0.70, 0.72),
    shower=(0.42, 0.28, 0.34, 0.42, 0.36, 0.30, 0.32, 0.34, 0.38, 0.42, 0.50, 0.50),
    wind=(3.2, 3.2, 2.6, 2.1, 2.2, 2.6, 2.9, 2.9, 2.6, 2.2, 2.2, 2.8),
    wind_from=(30, 30, 40, 70, 160, 180, 185, 185, 180, 210, 310, 360),
    air_mass=60,
    fronts=0.15,
    skew=0.35,
    flutter=(0.35, 0.45),
    mixing=0.5,
    sea_breeze=1.2,
    afternoon_cloud=0.9,
    turbidity=4.4,
    pressure_spread=90,
    pressure_season=20,
)

SABLEWICK_BAY = Site(
    name="Sablewick Bay",
    climate="hot-humid subtropical coast",
    seed=4102,
    latitude=27.2,
    longitude=-63.8,
    utc_offset=-4.0,
    elevation=4,
    dry_bulb=(15.6, 16.7, 19.2, 22.2, 25.2, 27.5, 28.3, 28.4, 27.3, 24.2, 20.2, 16.9),
    dew_point=(10.2, 11.2, 13.4, 16.0, 19.8, 22.8, 23.9, 24.0, 22.9, 18.9, 14.8, 11.7),
    sun_range=(6.8, 6.8, 6.8, 6.6, 6.4, 6.0, 6.0, 6.0, 6.0, 6.4, 6.6, 6.8),
    dry_bulb_spread=(4.2, 3.8, 3.2, 2.2, 1.4, 0.8, 0.7, 0.7, 1.0, 2.2, 3.2, 4.0),
    dew_point_spread=(5.2, 5.0, 4.6, 3.6, 2.0, 0.9, 0.7, 0.7, 1.1, 2.8, 4.2, 5.0),
    together=(0.88, 0.88, 0.85, 0.75, 0.55, 0.25, 0.15, 0.15, 0.35, 0.75, 0.85, 0.88),
    cloud=(0.50, 0.50, 0.48, 0.42, 0.46, 0.56, 0.56, 0.56, 0.56, 0.46, 0.44, 0.48),
    shower=(0.05, 0.05, 0.06, 0.06, 0.14, 0.32, 0.36, 0.36, 0.30, 0.14, 0.06, 0.05),
    wind=(4.2, 4.4, 4.6, 4.4, 4.0, 3.6, 3.4, 3.4, 3.7, 4.2, 4.2, 4.1),
    wind_from=(350, 360, 40, 90, 110, 120, 120, 115, 80, 50, 20, 360),
    air_mass=75,
    fronts=0.55,
    skew=0.40,
    flutter=(0.40, 0.65),
    mixing=0.6,
    sea_breeze=1.5,
    afternoon_cloud=0.6,
    turbidity=3.6,
    pressure_spread=330,
    pressure_season=220,
)

ONDAVARI = Site(
    name="Ondavari",
    climate="monsoon, inland",
    seed=4103,
    latitude=19.3,
    longitude=64.6,
    utc_offset=4.5,
    elevation=420,
    dry_bulb=(20.8, 23.4, 27.6, 31.6, 33.8, 30.6, 27.0, 26.3, 26.8, 25.8, 22.8, 20.4),
    dew_point=(10.4, 10.0, 10.6, 13.0, 17.6, 22.6, 23.6, 23.4, 22.9, 19.0, 14.4, 11.4),
    sun_range=(13.8, 14.2, 14.2, 13.6, 12.4, 8.6, 6.2, 6.0, 7.4, 10.6, 12.4, 13.4),
    dry_bulb_spread=(1.8, 2.0, 1.9, 1.7, 1.8, 2.0, 1.3, 1.1, 1.2, 1.5, 1.6, 1.7),
    dew_point_spread=(2.8, 3.0, 3.2, 3.4, 3.2, 1.5, 0.8, 0.8, 1.1, 2.6, 3.0, 2.9),
    together=(0.45, 0.40, 0.20, -0.10, -0.45, -0.50, -0.15, 0.0, 0.0, 0.10, 0.35, 0.45),
    cloud=(0.18, 0.15, 0.18, 0.24, 0.30, 0.66, 0.84, 0.84, 0.66, 0.36, 0.24, 0.20),
    shower=(0.01, 0.01, 0.02, 0.04, 0.10, 0.38, 0.50, 0.48, 0.36, 0.12, 0.03, 0.01),
    wind=(2.0, 2.2, 2.5, 3.0, 4.2, 5.0, 4.8, 4.2, 2.8, 1.9, 1.8, 1.8),
    wind_from=(60, 40, 330, 310, 300, 255, 250, 255, 270, 40, 60, 65),
    air_mass=90,
    fronts=0.25,
    skew=0.25,
    flutter=(0.50, 0.85),
    mixing=1.6,
    sea_breeze=0.3,
    afternoon_cloud=0.8,
    turbidity=4.4,
    pressure_spread=190,
    pressure_season=450,
)

MILLBRANDT = Site(
    name="Millbrandt",
    climate="mixed-humid continental, with frost",
    seed=4104,
    latitude=41.3,
    longitude=-46.2,
    utc_offset=-3.0,
    elevation=250,
    dry_bulb=(-1.4, 0.6, 5.6, 11.6, 17.2, 22.2, 24.6, 23.8, 19.6, 13.2, 6.6, 0.8),
    dew_point=(-7.0, -6.0, -2.4, 3.0, 9.4, 15.6, 18.6, 18.4, 13.8, 6.8, 0.7, -4.4),
    sun_range=(6.4, 7.2, 8.6, 9.8, 10.2, 10.2, 10.0, 10.0, 10.2, 9.6, 7.6, 6.2),
    dry_bulb_spread=(6.0, 5.8, 5.3, 4.6, 3.8, 2.8, 2.3, 2.4, 3.3, 4.3, 5.2, 5.8),
    dew_point_spread=(6.4, 6.3, 6.0, 5.6, 4.7, 3.1, 2.5, 2.6, 3.9, 5.2, 5.9, 6.3),
    together=(0.90, 0.88, 0.82, 0.75, 0.70, 0.60, 0.55, 0.55, 0.65, 0.75, 0.84, 0.90),
    cloud=(0.66, 0.64, 0.62, 0.58, 0.56, 0.50, 0.46, 0.44, 0.44, 0.48, 0.60, 0.68),
    shower=(0.0, 0.0, 0.02, 0.08, 0.16, 0.20, 0.18, 0.16, 0.10, 0.04, 0.0, 0.0),
    wind=(4.4, 4.4, 4.7, 4.6, 3.9, 3.4, 3.0, 2.8, 3.1, 3.6, 4.2, 4.3),
    wind_from=(290, 295, 290, 260, 230, 215, 210, 205, 200, 220, 270, 285),
    air_mass=80,
    fronts=0.60,
    skew=0.10,
    flutter=(0.60, 0.95),
    mixing=0.4,
    sea_breeze=0.3,
    afternoon_cloud=0.5,
    turbidity=3.2,
    pressure_spread=700,
    pressure_season=150,
)

ALTO_SERRONE = Site(
    name="Alto Serrone",
    climate="high-altitude, dry",
    seed=4105,
    latitude=34.6,
    longitude=-151.2,
    utc_offset=-10.0,
    elevation=2400,
    dry_bulb=(-1.6, 0.4, 4.0, 8.2, 13.2, 18.4, 20.2, 19.0, 15.4, 9.4, 3.2, -1.2),
    dew_point=(-11.5, -11.0, -10.5, -9.0, -5.5, -1.0, 7.4, 8.8, 3.6, -4.0, -8.5, -11.0),
    sun_range=(12.2, 13.0, 14.0, 15.0, 15.4, 15.6, 13.6, 13.0, 13.8, 14.2, 13.0, 12.0),
    dry_bulb_spread=(3.6, 3.6, 3.5, 3.4, 3.0, 2.5, 1.7, 1.6, 2.4, 3.2, 3.6, 3.7),
    dew_point_spread=(4.2, 4.2, 4.3, 4.6, 5.0, 5.2, 3.6, 2.8, 4.4, 4.8, 4.4, 4.2),
    together=(0.55, 0.50, 0.35, 0.20, 0.05, -0.25, -0.30, -0.25, 0.0, 0.25, 0.45, 0.55),
    cloud=(0.36, 0.36, 0.36, 0.32, 0.28, 0.22, 0.42, 0.42, 0.28, 0.26, 0.30, 0.34),
    shower=(0.0, 0.0, 0.01, 0.02, 0.05, 0.08, 0.32, 0.32, 0.14, 0.04, 0.01, 0.0),
    wind=(3.4, 3.7, 4.4, 4.7, 4.5, 4.1, 3.4, 3.1, 3.3, 3.5, 3.5, 3.3),
    wind_from=(300, 290, 270, 255, 245, 235, 190, 180, 220, 250, 280, 300),
    air_mass=85,
    fronts=0.45,
    skew=0.10,
    flutter=(0.70, 1.30),
    mixing=2.2,
    sea_breeze=0.3,
    afternoon_cloud=1.1,
    turbidity=2.3,
    pressure_spread=330,
    pressure_season=-170,
)

CAPE_WENDLE = Site(
    name="Cape Wendle",
    climate="maritime, southern hemisphere",
    seed=4106,
    latitude=-41.2,
    longitude=-133.2,
    utc_offset=-9.0,
    elevation=35,
    dry_bulb=(16.8, 17.1, 15.8, 13.6, 11.4, 9.5, 8.8, 9.3, 10.6, 12.0, 13.6, 15.5),
    dew_point=(12.5, 12.9, 11.8, 9.9, 8.0, 6.1, 5.3, 5.5, 6.4, 7.8, 9.2, 11.2),
    sun_range=(5.6, 5.6, 5.2, 4.6, 3.9, 3.6, 3.6, 4.1, 4.5, 4.9, 5.2, 5.4),
    dry_bulb_spread=(1.8, 1.8, 1.9, 1.9, 2.0, 2.0, 1.9, 1.9, 2.0, 1.9, 1.9, 1.8),
    dew_point_spread=(2.5, 2.5, 2.6, 2.7, 2.7, 2.7, 2.6, 2.6, 2.7, 2.7, 2.7, 2.6),
    together=(0.65, 0.65, 0.70, 0.78, 0.85, 0.88, 0.88, 0.88, 0.82, 0.75, 0.70, 0.65),
    cloud=(0.58, 0.58, 0.58, 0.60, 0.62, 0.64, 0.62, 0.62, 0.64, 0.64, 0.62, 0.60),
    shower=(0.05, 0.05, 0.05, 0.06, 0.06, 0.06, 0.06, 0.06, 0.07, 0.07, 0.06, 0.05),
    wind=(6.4, 6.2, 6.0, 5.9, 6.0, 6.2, 6.2, 6.4, 6.8, 7.2, 7.1, 6.8),
    wind_from=(320, 320, 320, 315, 305, 300, 300, 305, 310, 315, 315, 320),
    air_mass=60,
    fronts=0.55,
    skew=0.15,
    flutter=(0.45, 0.65),
    mixing=0.2,
    sea_breeze=0.8,
    afternoon_cloud=0.2,
    turbidity=2.7,
    pressure_spread=880,
    pressure_season=-100,
)

SITES: tuple[Site, ...] = (PORT_QUELLIN, SABLEWICK_BAY, ONDAVARI, MILLBRANDT, ALTO_SERRONE, CAPE_WENDLE)
