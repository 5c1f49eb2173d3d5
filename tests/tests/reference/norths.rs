//! Declination and convergence against ppigrf, wmm-calculator and PROJ; the values and the versions
//! are in `data/reference/`, made by `scripts/norths.py`.

use hade::frames::{Azimuth, Ellipsoid, MagneticField, MapGrid, Site};
use hade::units::Units;
use hade_tests::{agree, data, number};
use serde_json::Value;

fn read(name: &str) -> Value {
    let path = data().join("reference").join(name);
    let text = std::fs::read_to_string(&path).unwrap_or_else(|e| panic!("{}: {e}", path.display()));
    serde_json::from_str(&text).unwrap_or_else(|e| panic!("{}: {e}", path.display()))
}

fn rows<'a>(file: &'a Value, key: &str, least: usize) -> &'a [Value] {
    let rows = file[key].as_array().unwrap_or_else(|| panic!("no {key}"));
    assert!(rows.len() >= least, "{key}: {}", rows.len());
    rows
}

fn field(row: &Value) -> MagneticField {
    let date = row["date"].as_str().expect("a date");
    let site = Site::at(number(row, "latitude").deg(), number(row, "longitude").deg(), date).unwrap();
    let site = site.with_height((1000.0 * number(row, "height_km")).m()).unwrap();
    let declination = site.declination().unwrap();
    assert!(agree(declination.angle.in_deg(), declination.field.unwrap().declination.in_deg(), 0.0));
    declination.field.unwrap()
}

/// The largest differences over a file: in the components, nT, and in declination and inclination,
/// degrees.
fn differences(rows: &[Value]) -> (f64, f64) {
    let (mut components, mut angles) = (0.0_f64, 0.0_f64);
    for row in rows {
        let b = field(row);
        for (got, key) in [(b.north.in_nt(), "north"), (b.east.in_nt(), "east"), (b.down.in_nt(), "down")] {
            components = components.max((got - number(row, key)).abs());
        }
        for (got, key) in [(b.declination.in_deg(), "declination"), (b.inclination.in_deg(), "inclination")] {
            angles = angles.max((got - number(row, key)).abs());
        }
    }
    assert!(components.is_finite() && angles.is_finite());
    (components, angles)
}

#[test]
fn igrf_against_ppigrf() {
    let file = read("igrf.json");
    let cases = rows(&file, "cases", 48);
    let (components, angles) = differences(cases);
    // ppigrf takes the sine of the angle between geocentric and geodetic latitude for the angle itself:
    // 6e-9 of the field. Measured 3.6e-4 nT.
    assert!(components < 5e-4, "{components} nT");
    assert!(angles < 1e-6, "{angles}°");
    // Its own interpolation in days differs by less than a day's change; measured 4.5e-4°.
    for row in cases {
        let days = number(row, "declination_by_days");
        assert!(agree(field(row).declination.in_deg(), days, 6e-4), "{row}");
    }
}

#[test]
fn wmm_against_noaas_calculator() {
    let file = read("wmm.json");
    let cases = rows(&file, "cases", 48);
    let (components, angles) = differences(cases);
    // Measured: 8e-11 nT and 6e-14°.
    assert!(components < 1e-9, "{components} nT");
    assert!(angles < 1e-11, "{angles}°");
    for row in cases {
        let (got, want) = (field(row).declination_per_year.in_deg(), number(row, "declination_per_year"));
        assert!(agree(got, want, 1e-12), "{got} {row}");
    }
}

fn ellipsoid(row: &Value) -> Ellipsoid {
    Ellipsoid { semi_major: number(row, "a").m(), inverse_flattening: number(row, "inverse_flattening") }
}

#[test]
fn convergence_against_proj() {
    let file = read("convergence.json");
    let grids = rows(&file, "grids", 8);
    let (mut angle, mut scale, mut place) = (0.0_f64, 0.0_f64, 0.0_f64);
    for row in rows(&file, "cases", 24) {
        let grid = grids.iter().find(|g| g["grid"] == row["grid"]).expect("its grid");
        let grid = MapGrid {
            ellipsoid: ellipsoid(grid),
            central_meridian: number(grid, "lon_0").deg(),
            latitude_of_origin: number(grid, "lat_0").deg(),
            scale: number(grid, "k"),
            false_easting: number(grid, "x_0").m(),
            false_northing: number(grid, "y_0").m(),
        };
        let site = Site::at(number(row, "latitude").deg(), number(row, "longitude").deg(), "2026-05-01").unwrap();
        let convergence = site.with_map_grid(grid).unwrap().convergence().unwrap();
        let projected = convergence.projected.unwrap();
        angle = angle.max((convergence.angle.in_deg() - number(row, "convergence")).abs());
        scale = scale.max((projected.scale - number(row, "scale")).abs());
        for (got, key) in [(projected.easting, "easting"), (projected.northing, "northing")] {
            place = place.max((got.in_m() - number(row, key)).abs());
        }
        // Grid azimuth = true azimuth − convergence.
        let on_grid = Azimuth::from_true_north(30.deg()).to_grid(site.with_map_grid(grid).unwrap()).unwrap();
        assert!(agree(on_grid.measured().in_deg(), 30.0 - number(row, "convergence"), 1e-8), "{row}");
    }
    // Measured: 2.4e-12°, 5.4e-11 (PROJ finds its scale by differences), 2.8e-9 m.
    assert!(angle < 1e-11, "{angle}°");
    assert!(scale < 1e-10, "{scale}");
    assert!(place < 1e-8, "{place} m");
}

/// UTM by PROJ to six decimals, worked out apart from the file: latitude, longitude, zone, convergence.
#[test]
fn convergence_in_five_zones() {
    for (latitude, longitude, zone, want) in [
        (45.0, 10.5, 32, 1.060_783),
        (60.0, 5.0, 31, 1.732_228),
        (37.0, -121.5, 10, 0.902_856),
        (53.0, -1.5, 30, 1.198_053),
        (-21.5, 115.0, 50, 0.733_265),
    ] {
        let site = Site::at(latitude.deg(), longitude.deg(), "2026-05-01").unwrap().with_utm(zone).unwrap();
        let got = site.convergence().unwrap().angle.in_deg();
        assert!(agree(got, want, 6e-7), "{latitude} {longitude}: {got}");
    }
}

/// The ellipsoids as PROJ and the EPSG data set have them, to the last figure they print.
#[test]
fn ellipsoids_against_proj() {
    let file = read("convergence.json");
    let ours = [
        ("WGS84", Ellipsoid::wgs84()),
        ("GRS80", Ellipsoid::grs80()),
        ("airy", Ellipsoid::airy_1830()),
        ("bessel", Ellipsoid::bessel_1841()),
        ("clrk66", Ellipsoid::clarke_1866()),
        ("intl", Ellipsoid::international_1924()),
        ("clrk80rgs", Ellipsoid::clarke_1880_rgs()),
    ];
    let shapes = rows(&file, "ellipsoids", ours.len());
    for (name, own) in ours {
        let shape = ellipsoid(shapes.iter().find(|s| s["ellps"] == name).unwrap_or_else(|| panic!("no {name}")));
        assert_eq!(own.semi_major, shape.semi_major, "{name}");
        assert!(agree(own.inverse_flattening, shape.inverse_flattening, 1e-9), "{name}: {}", shape.inverse_flattening);
    }
}
