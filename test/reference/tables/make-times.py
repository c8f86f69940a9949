"""Writes times.json: instants as astropy gives them in the scales UTC, TAI, TT and TDB.

    apt-get install -y python3-astropy && /usr/bin/python3 make-times.py

TDB is for the geocentre (ERFA's eraDtdb). A JD or MJD in UTC is ERFA's quasi-JD: a day with a leap
second is 86,401 s long. `jd` and `mjd` are decimal strings, exact to what astropy's two doubles hold;
`jd64` and `mjd64` are the nearest doubles.
"""

import json
import pathlib
import sys

import astropy
import erfa
from astropy.time import Time
from astropy.utils import iers

iers.conf.auto_download = False
iers.conf.iers_degraded_accuracy = "ignore"

SCALES = ("utc", "tai", "tt", "tdb")

GIVEN = [
    # Every decade, with fractions.
    *(("utc", f"{year}-{rest}") for year in range(1973, 2036, 4)
      for rest in ("01-01T00:00:00", "04-11T06:30:15.25", "10-30T23:59:59.999999999")),
    # Both sides of leap seconds, and within one.
    *(("utc", f"{day}") for day in (
        "1972-06-30T23:59:60.5", "1972-07-01T00:00:00", "1998-12-31T23:59:59", "1998-12-31T23:59:60",
        "1999-01-01T00:00:00", "2008-12-31T23:59:60.999", "2015-06-30T12:00:00",
        "2015-06-30T23:59:59.5", "2015-06-30T23:59:60", "2015-07-01T00:00:00.001",
        "2016-12-31T00:00:00", "2016-12-31T06:00:00", "2016-12-31T23:59:59.999",
        "2016-12-31T23:59:60.25", "2017-01-01T00:00:00", "2017-01-01T00:00:36")),
    # The first day of UTC with whole leap seconds, leap days, the standard epochs.
    ("utc", "1972-01-01T00:00:00"), ("utc", "2000-02-29T12:00:00"), ("utc", "2024-02-29T23:59:59"),
    ("tt", "2000-01-01T12:00:00"), ("tdb", "2000-01-01T12:00:00"), ("tai", "2000-01-01T12:00:00"),
    # Given in another scale, some of them within a leap second of UTC.
    ("tt", "2017-01-01T00:01:08.434"), ("tt", "2017-01-01T00:01:09.184"),
    ("tai", "2017-01-01T00:00:36.5"), ("tai", "2017-01-01T00:00:37"),
    *((scale, f"{day}") for scale in ("tai", "tt", "tdb") for day in (
        "1984-07-04T05:06:07.891", "2011-03-20T18:00:00", "2029-11-30T23:59:00.000001",
        "2044-05-05T05:05:05.5")),
]

# JD and MJD as tables carry them, with the ISO text that they stand for.
NUMBERS = [
    ("jd", "utc", 2451545.0), ("jd", "utc", 2460310.5), ("jd", "utc", 2459580.75),
    ("jd", "utc", 2457754.25), ("jd", "utc", 2457753.75), ("jd", "utc", 2441317.5),
    ("jd", "tt", 2451545.0), ("jd", "tt", 2460676.123456789), ("jd", "tdb", 2460676.123456789),
    ("jd", "tai", 2455197.625), ("jd", "tdb", 2466154.9999999),
    ("mjd", "utc", 51544.5), ("mjd", "utc", 60310.0), ("mjd", "utc", 57753.9999),
    ("mjd", "utc", 57753.5), ("mjd", "utc", 60123.123456789), ("mjd", "utc", 41317.0),
    ("mjd", "tt", 60123.123456789), ("mjd", "tdb", 60123.123456789), ("mjd", "tai", 60123.123456789),
    ("mjd", "tdb", 44239.0), ("mjd", "tt", 69806.75),
]


def instant(time):
    return {
        scale: {
            "iso": getattr(time, scale).to_value("isot"),
            "jd": getattr(time, scale).to_value("jd", "str"),
            "mjd": getattr(time, scale).to_value("mjd", "str"),
            "jd64": getattr(time, scale).jd,
            "mjd64": getattr(time, scale).mjd,
        }
        for scale in SCALES
    }


def main():
    instants = [
        {"given": {"scale": scale, "format": "iso", "value": text},
         **instant(Time(text, format="isot", scale=scale, precision=9))}
        for scale, text in GIVEN
    ]
    instants += [
        {"given": {"scale": scale, "format": form, "value": number},
         **instant(Time(number, format=form, scale=scale, precision=9))}
        for form, scale, number in NUMBERS
    ]
    leaps = [
        {"from": f"{year:04}-{month:02}-01", "taiMinusUtc": float(offset)}
        for year, month, offset in erfa.leap_seconds.get() if year >= 1972
    ]
    out = {
        "about": "Instants in four time scales; see make-times.py beside it.",
        "versions": {
            "python": sys.version.split()[0],
            "astropy": astropy.__version__,
            "pyerfa": erfa.__version__,
            "sofa": erfa.version.sofa_version,
        },
        "leapSeconds": leaps,
        "instants": instants,
    }
    path = pathlib.Path(__file__).with_name("times.json")
    path.write_text(json.dumps(out, indent=2) + "\n")


main()
