#!/usr/bin/python3
"""The Sun as a star: its barycentric velocity along one line of sight, sampled like a long survey.

Writes sun-as-star.csv beside this file. The motion comes from ERFA's epv00, a general-purpose ephemeris of the Earth
(heliocentric and barycentric; the difference of the two is the Sun about the barycentre of the solar system). It is
physics, not a Keplerian model: planets pull each other, and all of them pull the Sun.

Run with Debian's interpreter: /usr/bin/python3 generate.py (packages python3-numpy, python3-erfa).
"""
import os

import erfa
import numpy as np

SEED = 20270417
FIRST_YEAR, LAST_YEAR = 1965, 2019  # 55 seasons
LONGITUDE_DEG = 40.0  # ecliptic longitude (J2000) of the line of sight, which lies in the ecliptic plane
ERROR_MPS = 0.3
AU_M = 149597870700.0  # IAU 2012 Resolution B2
SECONDS_PER_DAY = 86400.0
OBLIQUITY_RAD = np.radians(84381.406 / 3600.0)  # J2000, IAU 2006


def line_of_sight():
    """Unit vector from the observer to the Sun, ICRS axes."""
    longitude = np.radians(LONGITUDE_DEG)
    x, y = np.cos(longitude), np.sin(longitude)
    return np.array([x, y * np.cos(OBLIQUITY_RAD), y * np.sin(OBLIQUITY_RAD)])


def sun_velocity_mps(bjd_tdb):
    """Barycentric velocity of the Sun along the line of sight, m/s, positive when it recedes."""
    heliocentric, barycentric = erfa.epv00(2451545.0, bjd_tdb - 2451545.0)
    sun_au_per_day = barycentric["v"] - heliocentric["v"]
    return sun_au_per_day @ line_of_sight() * AU_M / SECONDS_PER_DAY


def survey_dates(random):
    """Eight to twelve nights in each yearly season of seven months, in short runs about a fixed local midnight."""
    dates = []
    for year in range(FIRST_YEAR, LAST_YEAR + 1):
        opening = 2451545.0 + (year - 2000) * 365.25 + 45.0
        wanted = random.integers(8, 13)
        nights = set()
        while len(nights) < wanted:
            start = random.integers(0, 213)
            for step in range(random.integers(1, 4)):  # runs of one to three nights
                if start + step < 213 and len(nights) < wanted:
                    nights.add(int(start + step))
        for night in sorted(nights):
            # the hour follows the target: it culminates four minutes earlier each night
            hour = (106 - night) * 3.94 / 60.0 + random.normal(0.0, 1.2)
            dates.append(opening + night + np.clip(hour, -5.0, 5.0) / 24.0)
    return np.round(np.array(dates), 5)


def main():
    random = np.random.Generator(np.random.PCG64(SEED))
    times = survey_dates(random)
    velocities = sun_velocity_mps(times) + random.normal(0.0, ERROR_MPS, times.size)
    path = os.path.join(os.path.dirname(os.path.abspath(__file__)), "sun-as-star.csv")
    with open(path, "w", newline="\n") as table:
        table.write(
            "# The Sun as a star: its velocity about the barycentre of the solar system, projected on the ecliptic\n"
            f"# direction of longitude {LONGITUDE_DEG:g} deg (J2000); positive when the Sun recedes.\n"
            f"# Computed with epv00 of pyerfa {erfa.__version__} (ERFA {erfa.version.erfa_version}), "
            f"numpy {np.__version__}, by generate.py.\n"
            f"# Dates drawn like a survey's, Gaussian noise of {ERROR_MPS:g} m/s added; seed {SEED}.\n"
            "BJD_TDB,RV (m/s),e_RV (m/s)\n"
        )
        for time, velocity in zip(times, velocities):
            table.write(f"{time:.5f},{velocity:.3f},{ERROR_MPS:.3f}\n")
    print(f"{times.size} rows, {(times[-1] - times[0]) / 365.25:.2f} years, {path}")


if __name__ == "__main__":
    main()
