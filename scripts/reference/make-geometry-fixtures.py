#!/usr/bin/python3
"""Reference values for the geometry tests, by astropy and ERFA.

Run from the repository root: /usr/bin/python3 scripts/reference/make-geometry-fixtures.py
Needs Debian's python3-astropy (5.2.1) and python3-numpy; no network. Same output on every run.
"""
import json
import pathlib

import astropy
import erfa
import numpy as np
from astropy.coordinates import get_sun
from astropy.time import Time
from astropy.utils import iers
from astropy.wcs import WCS

iers.conf.auto_download = False
OUT = pathlib.Path("fixtures/geometry")


def header(ctype, crval, cdelt, unit="deg", crpix=(100.5, 80.25), **more):
    cards = {
        "CTYPE1": ctype[0], "CTYPE2": ctype[1], "CUNIT1": unit, "CUNIT2": unit,
        "CRPIX1": crpix[0], "CRPIX2": crpix[1], "CRVAL1": crval[0], "CRVAL2": crval[1],
    }
    if cdelt:
        cards.update(CDELT1=cdelt[0], CDELT2=cdelt[1])
    cards.update(more)
    return cards


def celestial(projection):
    return (f"HPLN-{projection}", f"HPLT-{projection}")


def graphic(projection):
    return (f"CRLN-{projection}", f"CRLT-{projection}")


CASES = {
    "tan at the origin": header(celestial("TAN"), (0, 0), (1.98, 1.98), "arcsec"),
    "tan off the origin": header(celestial("TAN"), (-164.0915, -482.0414), (0.5, 0.5), "arcsec",
        PC1_1=0.9899233972324522, PC1_2=-0.1416039110044662,
        PC2_1=0.1416039110044662, PC2_2=0.9899233972324522),
    "tan far off": header(celestial("TAN"), (40, 55), (0.1, 0.1)),
    "tan south, north pole turned": header(celestial("TAN"), (10, -35), (0.1, 0.12), LONPOLE=150.0),
    "tan with CROTA2": header(celestial("TAN"), (3, -2), (0.8, 0.8), "arcsec", CROTA2=180.013397),
    "tan with CROTA2, not square": header(celestial("TAN"), (120, 300), (0.29714, 0.31998), "arcsec",
        CROTA2=27.5),
    "tan with CD": header(celestial("TAN"), (0.1, 0.2), None, "deg",
        CD1_1=-5e-4, CD1_2=1e-4, CD2_1=2e-4, CD2_2=4e-4),
    "tan with PC skewed": header(celestial("TAN"), (1, 1), (0.01, 0.02), PC1_1=0.9, PC1_2=-0.3,
        PC2_1=0.2, PC2_2=1.1),
    "tan with one PC element": header(celestial("TAN"), (1, 1), (0.01, 0.02), PC1_2=0.25),
    "sin": header(celestial("SIN"), (15, 20), (0.2, 0.2), CROTA2=-12.0),
    "arc": header(celestial("ARC"), (-20, 5), (0.3, 0.3)),
    "arc wide": header(celestial("ARC"), (0, 0), (0.9, 0.9)),
    "car on the equator": header(graphic("CAR"), (200, 0), (0.5, 0.5)),
    "car oblique": header(graphic("CAR"), (200, 25), (0.2, 0.2)),
    "cea on the equator": header(graphic("CEA"), (130, 0), (0.3, 0.3)),
    "cea with lambda": header(graphic("CEA"), (130, 0), (0.3, 0.3), PV2_1=0.75),
    "cea oblique north": header(graphic("CEA"), (100, 20), (0.03, 0.03)),
    "cea oblique south": header(graphic("CEA"), (345, -17.5), (0.1, 0.1)),
    "cea oblique, lambda": header(graphic("CEA"), (12, -8), (0.1, 0.1), PV2_1=0.9),
    "cea oblique, LONPOLE and LATPOLE": header(graphic("CEA"), (60, 10), (0.1, 0.1), LONPOLE=30.0,
        LATPOLE=90.0),
    "cea oblique, LATPOLE south": header(graphic("CEA"), (60, 10), (0.1, 0.1), LONPOLE=30.0,
        LATPOLE=-90.0),
    "cea as in a patch of the real headers": header(graphic("CEA"), (-27.392353100000001,
        5.3405499499999998), (0.0299999993, 0.0299999993), crpix=(345.0, 182.0)),
    "stonyhurst cea": header(("HGLN-CEA", "HGLT-CEA"), (-5, 40), (0.1, 0.1)),
    "axes swapped": header(("HPLT-TAN", "HPLN-TAN"), (-5, 40), (0.1, 0.1)),
}


def wcs_cases(random):
    cases = []
    for name, cards in CASES.items():
        wcs = WCS(cards)
        pixels = np.round(random.uniform(1, 200, size=(8, 2)), 3)
        world = wcs.all_pix2world(pixels, 1)
        back = wcs.all_world2pix(world, 1)
        assert np.allclose(back, pixels, atol=1e-6), name
        if cards["CTYPE1"][2:4] == "LT":
            world = world[:, ::-1]
        cases.append({"name": name, "cards": cards, "pixels": pixels.tolist(),
                      "lonLatDeg": world.tolist()})
    return cases


def patch_cases(random):
    """Grids of local patches: centre, pixel side and sphere, and where astropy puts their pixels."""
    cases = []
    for lon, lat, pixel, radius, nx, ny in [
        (203.4, -20.4, 1.4184, 696.0, 175, 140), (0.0, 0.0, 0.36, 695.7, 512, 300),
        (359.2, 33.0, 2.5, 695.7, 64, 65), (12.5, -61.0, 1.0, 695.7, 200, 201),
    ]:
        step = np.degrees(pixel / radius)
        cards = {
            "CTYPE1": "CRLN-CEA", "CTYPE2": "CRLT-CEA", "CUNIT1": "deg", "CUNIT2": "deg",
            "CRPIX1": (nx + 1) / 2, "CRPIX2": (ny + 1) / 2, "CRVAL1": lon, "CRVAL2": lat,
            "CDELT1": step, "CDELT2": step, "LONPOLE": 0.0 if lat >= 0 else 180.0,
            "LATPOLE": 90 - abs(lat),
        }
        pixels = np.round(random.uniform(1, [nx, ny], size=(6, 2)), 3)
        world = WCS(cards).all_pix2world(pixels, 1)
        cases.append({"nx": nx, "ny": ny, "pixelMm": pixel, "sphereRadiusMm": radius,
                      "carringtonLongitudeDeg": lon, "latitudeDeg": lat, "cards": cards,
                      "pixels": pixels.tolist(), "lonLatDeg": world.tolist()})
    return cases


def time_cases():
    table = [[int(row["year"]), int(row["month"]), int(row["tai_utc"])]
             for row in erfa.leap_seconds.get() if row["year"] >= 1972]
    tai = ["1992-07-01T00:00:10.000", "1999-12-10T23:59:30.000", "2009-01-01T00:00:32.500",
           "2010-10-15T00:03:30.000", "2017-01-01T00:00:37.500", "2024-06-28T00:00:08.212"]
    # In a leap second ISO text has no second 60 here: the instants above avoid it.
    converted = [[text, Time(text, scale="tai").utc.isot] for text in tai]
    return {"leapSeconds": table, "taiToUtc": converted}


def sun_cases():
    dates = ["1992-10-13T00:00:00", "2000-07-14T10:24:00", "2011-02-15T01:44:00",
             "2014-10-24T21:00:00", "2024-06-27T23:59:31", "2031-05-01T12:00:00"]
    return [{"date": date, "distanceAu": get_sun(Time(date)).distance.au} for date in dates]


def main():
    random = np.random.default_rng(20310501)
    versions = {"astropy": astropy.__version__, "numpy": np.__version__, "erfa": erfa.__version__}
    files = {
        "wcs.json": {"madeWith": versions, "cases": wcs_cases(random)},
        "patch-grid.json": {"madeWith": versions, "cases": patch_cases(random)},
        "time.json": {"madeWith": versions, **time_cases()},
        "sun.json": {"madeWith": versions, "cases": sun_cases()},
    }
    OUT.mkdir(parents=True, exist_ok=True)
    for name, content in files.items():
        (OUT / name).write_text(json.dumps(content, indent=1) + "\n")


if __name__ == "__main__":
    main()
