"""Writes cases.json: airmass, astronomical twilight and the hours at airmass 2 or less of five targets, by astropy.

Run with Debian's python3 and python3-astropy, offline: /usr/bin/python3 make-cases.py
"""
import json
import warnings

import astropy
import astropy.units as u
import numpy as np
from astropy.coordinates import AltAz, EarthLocation, SkyCoord, get_sun
from astropy.time import Time
from astropy.utils import iers

iers.conf.auto_download = False
warnings.simplefilter("ignore")

# Invented targets and sites on round numbers; nights within the Earth-rotation table that comes with the package.
CASES = [
    ("2020-11-14", (-31.27, -70.81, 2380), (63.2, -31.3)),
    ("2021-03-02", (28.75, -17.9, 2300), (187.5, 12.4)),
    ("2020-07-21", (-44.0, 170.5, 1030), (315.0, -62.0)),
    ("2021-01-10", (48.0, 11.6, 500), (83.0, 22.0)),
    ("2021-05-05", (0.02, 36.9, 1800), (150.1, 2.2)),
]


def halve(function, low, high):
    below = function(low) < 0
    while high - low > 1e-6:
        middle = (low + high) / 2
        if (function(middle) < 0) == below:
            low = middle
        else:
            high = middle
    return (low + high) / 2


def crossings(function, start, end, step):
    grid = np.arange(start, end + step / 2, step)
    values = [function(x) for x in grid]
    return [halve(function, a, b) for a, b, p, q in zip(grid, grid[1:], values, values[1:]) if (p < 0) != (q < 0)]


cases = []
for date, (latitude, longitude, height), (ra, dec) in CASES:
    site = EarthLocation.from_geodetic(longitude * u.deg, latitude * u.deg, height * u.m)
    noon = Time(f"{date}T12:00:00", scale="utc") - (longitude / 15) * u.hour
    at = lambda hours: noon + hours * u.hour
    frame = lambda hours: AltAz(obstime=at(hours), location=site)
    sun = lambda hours: get_sun(at(hours)).transform_to(frame(hours)).alt.deg + 18
    target = SkyCoord(ra * u.deg, dec * u.deg, frame="icrs")
    altitude = lambda hours: target.transform_to(frame(hours)).alt.deg - 30
    dusk, dawn = crossings(sun, 0.0, 24.0, 0.25)
    spans = [dusk] if altitude(dusk) >= 0 else []
    spans += crossings(altitude, dusk, dawn, 0.1)
    if len(spans) % 2:
        spans.append(dawn)
    iso = lambda hours: at(hours).isot + "Z"
    airmass = []
    for hours in np.linspace(dusk, dawn, 5):
        alt = target.transform_to(frame(hours)).alt
        if alt.deg > 5:
            airmass.append({"at": iso(hours), "airmass": float(1 / np.sin(alt.rad))})
    cases.append({
        "civilDate": date,
        "site": {"latitudeDegrees": latitude, "longitudeEastDegrees": longitude, "heightMetres": height},
        "target": {"raDegrees": ra, "decDegrees": dec},
        "dusk": iso(dusk),
        "dawn": iso(dawn),
        "above": [[iso(a), iso(b)] for a, b in zip(spans[::2], spans[1::2])],
        "airmass": airmass,
    })

with open("cases.json", "w") as out:
    json.dump({"astropy": astropy.__version__, "cases": cases}, out, indent=1)
    out.write("\n")
