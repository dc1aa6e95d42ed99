#!/usr/bin/python3
"""Altitudes, clock differences and observable windows computed with astropy, for the tests of src/planning.

Writes astropy-sky.json beside this file. Run with Debian's interpreter (package python3-astropy): /usr/bin/python3 generate.py
No refraction (pressure 0), bundled Earth orientation data, astropy's built-in ephemeris; nothing is downloaded.
"""
import json
import os

import astropy
import astropy.units as u
import erfa
import numpy as np
from astropy.coordinates import AltAz, EarthLocation, SkyCoord, get_sun
from astropy.time import Time
from astropy.utils import iers
from scipy.optimize import brentq

iers.conf.auto_download = False
iers.conf.iers_degraded_accuracy = "warn"

# Invented sites and targets: (name, latitude, east longitude, elevation; right ascension, declination J2000)
PLACES = [
    ("mid-northern", 38.2, -12.4, 310.0, 318.4, 17.6),
    ("southern, far east", -33.7, 151.5, 900.0, 95.0, -62.0),
    ("high-northern, circumpolar target", 64.5, 25.0, 120.0, 10.0, 75.0),
    ("equator, far west", 0.2, -171.0, 20.0, 200.0, -5.0),
    ("low in the middle of a winter night", 52.0, 5.0, 30.0, 270.0, 60.0),
]
NIGHTS_UTC = ["2013-03-20", "2015-06-21", "2018-09-10", "2020-12-21", "2022-05-01"]
TWILIGHT_DEG, MAXIMUM_AIRMASS = -12.0, 1.9


def kasten_young(altitude):
    return 1 / (np.sin(np.radians(altitude)) + 0.50572 * (altitude + 6.07995) ** -1.6364)


LOWEST = brentq(lambda h: kasten_young(h) - MAXIMUM_AIRMASS, 1.0, 89.0)


def altitudes(jd_utc, place, target):
    time = Time(jd_utc, format="jd", scale="utc")
    frame = AltAz(obstime=time, location=place, pressure=0 * u.hPa)
    return get_sun(time).transform_to(frame).alt.deg, target.transform_to(frame).alt.deg


def shift_days(jd_utc, place, target):
    time = Time(jd_utc, format="jd", scale="utc", location=place)
    barycentric = time.tdb + time.light_travel_time(target)
    return float((barycentric.jd1 - time.jd1) + (barycentric.jd2 - time.jd2))


def windows(noon_utc, place, target):
    """Windows of the 24 hours from a UTC date, BJD_TDB, with edges solved to 0.1 s."""
    def margin(jd):
        sun, star = altitudes(jd, place, target)
        return np.minimum(TWILIGHT_DEG - sun, star - LOWEST)

    grid = noon_utc + np.arange(0, 24 * 30 + 1) / (24 * 30.0)
    values = margin(grid)
    edges = [
        brentq(lambda jd: float(margin(jd)), before, after, xtol=1e-6)
        for before, after, value, following in zip(grid, grid[1:], values, values[1:])
        if (value >= 0) != (following >= 0)
    ]
    if values[0] >= 0:
        edges.insert(0, grid[0])
    if values[-1] >= 0:
        edges.append(grid[-1])
    return [[edge + shift_days(edge, place, target) for edge in edges[i : i + 2]] for i in range(0, len(edges), 2)]


def main():
    sky, nights = [], []
    for name, latitude, longitude, elevation, ra, dec in PLACES:
        site = {"name": name, "latitudeDeg": latitude, "longitudeEastDeg": longitude, "elevationM": elevation}
        place = EarthLocation.from_geodetic(longitude * u.deg, latitude * u.deg, elevation * u.m)
        target = SkyCoord(ra * u.deg, dec * u.deg, frame="icrs")
        direction = {"rightAscensionDeg": ra, "declinationDeg": dec}
        for index, date in enumerate(NIGHTS_UTC):
            jd = Time(date, scale="utc").jd + 0.13 * index + 0.4
            sun, star = altitudes(jd, place, target)
            sky.append({
                "site": site,
                "target": direction,
                "jdUtc": jd,
                "sunAltitudeDeg": float(sun),
                "targetAltitudeDeg": float(star),
                "bjdTdbMinusJdUtcSeconds": 86400 * shift_days(jd, place, target),
            })
            # a local mean noon at the site, so that the 24 hours hold one whole night
            noon = np.floor(Time(date, scale="utc").jd) - longitude / 360
            nights.append({
                "site": site,
                "target": direction,
                "noonJdUtc": noon,
                "windowsBjdTdb": windows(noon, place, target),
            })
    out = {
        "source": f"astropy {astropy.__version__}, pyerfa {erfa.__version__}: "
        "get_sun, AltAz with pressure 0, light_travel_time (barycentric)",
        "generator": "generate.py",
        "twilightDeg": TWILIGHT_DEG,
        "maximumAirmass": MAXIMUM_AIRMASS,
        "sky": sky,
        "nights": nights,
    }
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "astropy-sky.json")
    with open(path, "w") as file:
        json.dump(out, file, indent=1)
        file.write("\n")


if __name__ == "__main__":
    main()
