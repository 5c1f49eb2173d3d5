"""Reference values of the norths: the magnetic field by ppigrf (IGRF-14) and wmm-calculator (WMM2025),
transverse Mercator grids by PROJ.

    pip install -r tests/scripts/requirements.txt
    python tests/scripts/norths.py

writes igrf.json, wmm.json and convergence.json into tests/data/reference/. The tests read those files
and need no Python. Angles in degrees, east positive; field in nT along geodetic north, east, down;
heights in km above the ellipsoid; coordinates in metres.
"""

import datetime
import hashlib
import importlib.metadata
import json
import math
import pathlib
import warnings

import numpy as np
import ppigrf
import pyproj
import wmm

ROOT = pathlib.Path(__file__).resolve().parents[2]
OUT = ROOT / "tests" / "data" / "reference"
MAGNETIC = ROOT / "crates" / "hade" / "src" / "frames" / "magnetic"


def version(package):
    return f"{package} {importlib.metadata.version(package)}"


def put(folder, name, about, versions, **lists):
    body = {"about": about, "made_by": "tests/scripts/norths.py", "versions": versions}
    lines = [json.dumps(body, ensure_ascii=False)[:-1]]
    for key, rows in lists.items():
        rows = ",\n  ".join(json.dumps(row, ensure_ascii=False) for row in rows)
        lines.append(f' "{key}": [\n  {rows}\n ]')
    (folder / name).write_text(",\n".join(lines) + "\n}\n", encoding="utf-8")


def same_file(ours, theirs):
    digests = [hashlib.sha256(pathlib.Path(p).read_bytes()).hexdigest() for p in (ours, theirs)]
    assert digests[0] == digests[1], f"{ours} is not {theirs}"


# Places all over the globe: latitude, longitude, height in km.
PLACES = [
    (57.2, 1.8, 0.0), (31.9, -102.1, 0.9), (-31.95, 141.45, 0.31), (69.6, 18.9, 0.1), (-26.2, 28.0, 1.7),
    (0.0, 0.0, 0.0), (1.3, 103.8, 5.0), (64.1, -21.9, 0.05), (-54.8, -68.3, 0.0), (78.2, 15.6, 0.4),
    (-77.8, 166.7, 0.0), (46.5, -81.0, -2.4), (24.5, 54.4, 0.0), (-5.1, -81.1, 0.0), (52.0, 104.3, 100.0),
    (36.1, 179.9, 0.0),
]
IGRF_DATES = [
    "1905-07-01", "1938-03-15", "1950-01-01", "1956-02-29", "1963-11-05", "1969-12-31", "1975-01-01", "1981-06-15",
    "1988-10-10", "1994-04-01", "1997-08-20", "2001-01-31", "2006-09-09", "2013-05-27", "2017-12-01", "2024-12-31",
]
WMM_DATES = ["2025-01-01", "2025-06-30", "2026-05-01", "2027-02-14", "2028-02-29", "2029-12-31"]


def field_row(date, place, north, east, down):
    lat, lon, height = place
    north, east, down = (float(v) for v in (north, east, down))
    return {
        "date": date, "latitude": lat, "longitude": lon, "height_km": height,
        "north": north, "east": east, "down": down,
        "declination": math.degrees(math.atan2(east, north)),
        "inclination": math.degrees(math.atan2(down, math.hypot(north, east))),
    }


def decimal_year(when):
    begin, end = (datetime.datetime(when.year + k, 1, 1) for k in (0, 1))
    return when.year + (when - begin) / (end - begin)


def by_ppigrf(place, when):
    """North, east, down."""
    lat, lon, height = place
    east, north, up = (float(np.ravel(v)[0]) for v in ppigrf.igrf(lon, lat, height, when))
    return np.array([north, east, -up])


def igrf(folder):
    same_file(MAGNETIC / "igrf14.shc", ppigrf.ppigrf.shc_fn)
    rows = []
    for i, date in enumerate(IGRF_DATES):
        for place in PLACES[i % 4 :: 4]:
            when = datetime.datetime.fromisoformat(date)
            # IGRF is linear in decimal years between its epochs five years apart; ppigrf is linear in
            # days, which a leap year shifts by less than one.
            first = when.year - when.year % 5
            share = (decimal_year(when) - first) / 5.0
            at = [by_ppigrf(place, datetime.datetime(year, 1, 1)) for year in (first, first + 5)]
            row = field_row(date, place, *((1.0 - share) * at[0] + share * at[1]))
            row["declination_by_days"] = field_row(date, place, *by_ppigrf(place, when))["declination"]
            rows.append(row)
    about = (
        "IGRF-14 by ppigrf at the epochs before and after a date, weighted linearly in decimal years; "
        "declination_by_days is ppigrf's own value, which it interpolates in days."
    )
    put(folder, "igrf.json", about, [version("ppigrf"), version("numpy"), version("pandas")], cases=rows)


def wmm2025(folder):
    same_file(MAGNETIC / "wmm2025.cof", pathlib.Path(wmm.__file__).parent / "coefs" / "WMM.COF")
    rows = []
    for i, date in enumerate(WMM_DATES):
        for place in PLACES[i % 2 :: 2]:
            lat, lon, height = place
            model = wmm.wmm_calc()
            warnings.simplefilter("ignore")  # 100 km is higher than its specification
            when = datetime.date.fromisoformat(date)
            model.setup_time(when.year, when.month, when.day)
            model.setup_env(lat, lon, height, unit="km", msl=False)
            all_of = {key: float(np.ravel(value)[0]) for key, value in model.get_all().items()}
            row = field_row(date, place, all_of["x"], all_of["y"], all_of["z"])
            row["declination_per_year"] = all_of["ddec"]
            rows.append(row)
    put(folder, "wmm.json", "WMM2025 by wmm-calculator.", [version("wmm-calculator"), version("geomaglib"), version("numpy")], cases=rows)


UTM = {"lat_0": 0.0, "k": 0.9996, "x_0": 500000.0, "y_0": 0.0, "ellps": "WGS84"}
GRIDS = {
    "utm 31 north": {**UTM, "lon_0": 3.0},
    "utm 60 south": {**UTM, "lon_0": 177.0, "y_0": 1e7},
    "utm 10 north": {**UTM, "lon_0": -123.0},
    "british national grid": {"lat_0": 49.0, "lon_0": -2.0, "k": 0.9996012717, "x_0": 400000.0, "y_0": -100000.0, "ellps": "airy"},
    "gauss-krueger zone 4": {"lat_0": 0.0, "lon_0": 12.0, "k": 1.0, "x_0": 4500000.0, "y_0": 0.0, "ellps": "bessel"},
    "on clarke 1880": {"lat_0": -20.0, "lon_0": 21.0, "k": 0.9999, "x_0": 300000.0, "y_0": 5000000.0, "ellps": "clrk80"},
    "on clarke 1866": {"lat_0": 30.0, "lon_0": -85.0, "k": 0.99996, "x_0": 152400.0, "y_0": 0.0, "ellps": "clrk66"},
    "on international 1924": {"lat_0": 0.0, "lon_0": 9.0, "k": 0.9996, "x_0": 500000.0, "y_0": 0.0, "ellps": "intl"},
}
POINTS = {
    "utm 31 north": [(57.2, 1.8), (0.0, 5.0), (60.0, 5.0), (83.9, 0.001), (45.0, 3.0), (12.5, 6.0)],
    "utm 60 south": [(-21.5, 174.0), (-45.2, 179.9), (-79.0, -179.9), (-0.001, 178.0)],
    "utm 10 north": [(37.0, -121.5), (64.4, -126.0)],
    "british national grid": [(50.5, 0.5), (57.2, 1.8), (60.8, -0.9), (49.9, -6.3), (53.0, -2.0)],
    "gauss-krueger zone 4": [(51.3, 10.6), (50.9, 13.4), (48.0, 15.0)],
    "on clarke 1880": [(-21.9, 22.7), (-33.0, 18.2), (-4.0, 24.0)],
    "on clarke 1866": [(31.5, -87.9), (34.9, -82.1)],
    "on international 1924": [(61.0, 6.1), (-10.0, 11.9), (43.0, 11.0)],
}


def by_differences(proj, lat, lon):
    """Minus the grid azimuth of a short piece of the meridian: central differences of the sixth order."""
    step = 0.05
    total = np.zeros(2)
    for k, weight in ((1, 45.0), (2, -9.0), (3, 1.0)):
        ahead, behind = (np.array(proj(lon, lat + sign * k * step)) for sign in (1.0, -1.0))
        total += weight * (ahead - behind)
    return -math.degrees(math.atan2(total[0], total[1]))


def convergence(folder):
    rows = []
    for name, grid in GRIDS.items():
        proj = pyproj.Proj(proj="tmerc", **grid)
        for lat, lon in POINTS[name]:
            factors = proj.get_factors(lon, lat)
            easting, northing = proj(lon, lat)
            ahead = by_differences(proj, lat, lon)
            assert abs(ahead - factors.meridian_convergence) < 1e-6, (name, lat, lon, ahead, factors)
            rows.append({
                "grid": name, "latitude": lat, "longitude": lon,
                "convergence": ahead, "convergence_by_factors": factors.meridian_convergence,
                "scale": factors.meridional_scale, "easting": easting, "northing": northing,
            })
    ellipsoids = pyproj.get_ellps_map()
    grids = []
    for name, grid in GRIDS.items():
        geod = pyproj.Geod(ellps=grid["ellps"])
        grids.append({"grid": name, **grid, "a": geod.a, "inverse_flattening": 1.0 / geod.f})
    shapes = []
    for key in ("WGS84", "GRS80", "airy", "bessel", "clrk66", "intl"):
        geod = pyproj.Geod(ellps=key)
        shapes.append({"ellps": key, "a": ellipsoids[key]["a"], "inverse_flattening": 1.0 / geod.f})
    # Clarke 1880 (RGS), EPSG 7012, as the datum Adindan has it; PROJ's own clrk80 is rounded otherwise.
    rgs = pyproj.CRS.from_epsg(4201).ellipsoid
    assert rgs.name == "Clarke 1880 (RGS)", rgs.name
    shapes.append({"ellps": "clrk80rgs", "a": rgs.semi_major_metre, "inverse_flattening": rgs.inverse_flattening})
    about = (
        "Transverse Mercator grids by PROJ: coordinates and scale; the convergence from central differences of "
        "the coordinates along the meridian, and from PROJ's own factors beside it."
    )
    put(folder, "convergence.json", about, [version("pyproj"), f"PROJ {pyproj.proj_version_str}"], ellipsoids=shapes, grids=grids, cases=rows)


# The last bits differ between processors and versions of libm: field in nT, coordinates in metres.
TOLERANCE = 1e-9


def write(folder: pathlib.Path) -> None:
    igrf(folder)
    wmm2025(folder)
    convergence(folder)


if __name__ == "__main__":
    OUT.mkdir(parents=True, exist_ok=True)
    write(OUT)
