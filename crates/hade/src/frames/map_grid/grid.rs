//! What defines a transverse Mercator grid: its ellipsoid, central meridian, scale and false origin.

use serde::{Deserialize, Serialize};

use crate::error::{Error, Result};
use crate::frames::site::within_half_turn;
use crate::units::{Angle, Length, Quantity, as_typed, fixed, require_between, with_typed_unit};

/// An ellipsoid of revolution by half its long axis and its inverse flattening.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Ellipsoid {
    /// Half the long axis a.
    pub semi_major: Length,
    /// The inverse flattening 1/f = a / (a − b).
    pub inverse_flattening: f64,
}

/// The parameters are those of the EPSG data set (as PROJ ships them; the tests hold them against it).
impl Ellipsoid {
    fn of(semi_major: f64, inverse_flattening: f64) -> Self {
        Ellipsoid { semi_major: Length::m(semi_major), inverse_flattening }
    }
    /// WGS 84.
    pub fn wgs84() -> Self {
        Ellipsoid::of(6_378_137.0, 298.257_223_563)
    }
    /// GRS 1980 (ETRS89, NAD83, GDA94).
    pub fn grs80() -> Self {
        Ellipsoid::of(6_378_137.0, 298.257_222_101)
    }
    /// Airy 1830 (OSGB36).
    pub fn airy_1830() -> Self {
        Ellipsoid::of(6_377_563.396, 299.324_964_6)
    }
    /// Bessel 1841 (DHDN, Tokyo).
    pub fn bessel_1841() -> Self {
        Ellipsoid::of(6_377_397.155, 299.152_812_8)
    }
    /// Clarke 1866 (NAD27).
    pub fn clarke_1866() -> Self {
        Ellipsoid::of(6_378_206.4, 294.978_698_213_898)
    }
    /// Clarke 1880 (RGS), used in Africa.
    pub fn clarke_1880_rgs() -> Self {
        Ellipsoid::of(6_378_249.145, 293.465)
    }
    /// International 1924 (ED50).
    pub fn international_1924() -> Self {
        Ellipsoid::of(6_378_388.0, 297.0)
    }

    pub(super) fn flattening(self) -> f64 {
        1.0 / self.inverse_flattening
    }

    /// "WGS 84", or the two numbers.
    pub fn words(self) -> String {
        let known = [
            ("WGS 84", Ellipsoid::wgs84()),
            ("GRS 1980", Ellipsoid::grs80()),
            ("Airy 1830", Ellipsoid::airy_1830()),
            ("Bessel 1841", Ellipsoid::bessel_1841()),
            ("Clarke 1866", Ellipsoid::clarke_1866()),
            ("Clarke 1880 (RGS)", Ellipsoid::clarke_1880_rgs()),
            ("International 1924", Ellipsoid::international_1924()),
        ];
        match known.iter().find(|(_, e)| *e == self) {
            Some((name, _)) => (*name).to_owned(),
            None => format!(
                "ellipsoid a = {} m, 1/f = {}",
                as_typed(self.semi_major.si()),
                as_typed(self.inverse_flattening)
            ),
        }
    }
}

/// A map grid on a transverse Mercator projection.
///
/// ```
/// use hade::prelude::*;
/// let british_national_grid = MapGrid {
///     ellipsoid: Ellipsoid::airy_1830(),
///     central_meridian: (-2).deg(),
///     latitude_of_origin: 49.deg(),
///     scale: 0.9996012717,
///     false_easting: 400_000.m(),
///     false_northing: (-100_000).m(),
/// };
/// ```
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct MapGrid {
    /// The ellipsoid of the grid's geodetic datum.
    pub ellipsoid: Ellipsoid,
    /// The longitude along which grid north is true north, east positive.
    pub central_meridian: Angle,
    /// The latitude of the grid's true origin, north positive.
    pub latitude_of_origin: Angle,
    /// The scale on the central meridian, a pure number near 1.
    pub scale: f64,
    /// The easting of the true origin.
    pub false_easting: Length,
    /// The northing of the true origin.
    pub false_northing: Length,
}

/// A site in a zone that is not its own may lie this far (degrees) from the zone's central meridian:
/// half a zone and the customary overlap.
const ZONE_REACH: f64 = 3.5;
/// No grid in use reaches farther (degrees) from its central meridian.
const REACH: f64 = 30.0;

impl MapGrid {
    /// A zone of UTM on WGS 84.
    ///
    /// # Errors
    /// When the zone is not between 1 and 60.
    pub fn utm(zone: u8, southern_hemisphere: bool) -> Result<Self> {
        if !(1..=60).contains(&zone) {
            return Err(Error::out_of_range("the UTM zone", zone.to_string(), "between 1 and 60"));
        }
        Ok(MapGrid {
            ellipsoid: Ellipsoid::wgs84(),
            central_meridian: Angle::deg(central_meridian(zone)),
            latitude_of_origin: Angle::default(),
            scale: 0.9996,
            false_easting: Length::m(500_000.0),
            false_northing: Length::m(if southern_hemisphere { 10_000_000.0 } else { 0.0 }),
        })
    }

    /// The zone of UTM that was chosen for a place, held against the place.
    pub(in crate::frames) fn utm_at(latitude: Angle, longitude: Angle, zone: u8) -> Result<Self> {
        let grid = MapGrid::utm(zone, latitude.si() < 0.0)?;
        if !(-80.0..=84.0).contains(&latitude.in_deg()) {
            return Err(Error::out_of_range(
                "the latitude of a site on UTM",
                with_typed_unit(latitude),
                "between -80° and 84°; nearer the poles state the convergence of the grid in use with .with_convergence(angle, source)?",
            ));
        }
        let off = within_half_turn((longitude - grid.central_meridian).si()).to_degrees();
        let own = utm_zone(latitude, longitude);
        if off.abs() > ZONE_REACH && zone != own {
            return Err(Error::not_physical(
                format!("UTM zone {zone} at longitude {}°", as_typed(longitude.in_deg())),
                format!(
                    "the site lies {}° from the zone's central meridian {}° and belongs to zone {own}; use .with_utm({own})?, or state a grid that reaches farther with .with_map_grid(MapGrid::utm({zone}, …)?)?.",
                    fixed(off.abs(), 1),
                    as_typed(grid.central_meridian.in_deg())
                ),
            ));
        }
        Ok(grid)
    }

    /// Holds every number against its range, and the grid against a longitude on it.
    pub(in crate::frames) fn checked(&self, longitude: Angle) -> Result<()> {
        let metres = Length::m;
        require_between(
            "half the long axis of the ellipsoid",
            self.ellipsoid.semi_major,
            metres(6.3e6),
            metres(6.45e6),
        )?;
        require_between("inverse flattening of the ellipsoid", self.ellipsoid.inverse_flattening, 250.0, 350.0)?;
        require_between(
            "central meridian of the map grid",
            self.central_meridian,
            Angle::deg(-180.0),
            Angle::deg(360.0),
        )?;
        require_between(
            "latitude of origin of the map grid",
            self.latitude_of_origin,
            Angle::deg(-90.0),
            Angle::deg(90.0),
        )?;
        require_between("scale on the central meridian of the map grid", self.scale, 0.9, 1.1)?;
        require_between("false easting of the map grid", self.false_easting, metres(-1e8), metres(1e8))?;
        require_between("false northing of the map grid", self.false_northing, metres(-1e8), metres(1e8))?;
        let off = within_half_turn((longitude - self.central_meridian).si()).to_degrees();
        if off.abs() > REACH {
            return Err(Error::not_physical(
                format!("A map grid with central meridian {}°", as_typed(self.central_meridian.in_deg())),
                format!(
                    "the site at longitude {}° lies {}° from it, and a transverse Mercator grid is used within {REACH}°; check the signs of both (east is positive).",
                    as_typed(longitude.in_deg()),
                    fixed(off.abs(), 1)
                ),
            ));
        }
        Ok(())
    }

    /// "UTM zone 31 north (WGS 84)", or the parameters.
    pub fn words(&self) -> String {
        let zone = (1..=60_u8).find(|zone| {
            [false, true].iter().any(|south| {
                MapGrid::utm(*zone, *south).is_ok_and(|utm| MapGrid { ellipsoid: self.ellipsoid, ..utm } == *self)
            })
        });
        if let Some(zone) = zone {
            let hemisphere = if self.false_northing.si() > 0.0 { "south" } else { "north" };
            return format!("UTM zone {zone} {hemisphere} ({})", self.ellipsoid.words());
        }
        format!(
            "transverse Mercator on {}, central meridian {}°, latitude of origin {}°, scale {}, false easting {} m, false northing {} m",
            self.ellipsoid.words(),
            as_typed(self.central_meridian.in_deg()),
            as_typed(self.latitude_of_origin.in_deg()),
            as_typed(self.scale),
            as_typed(self.false_easting.si()),
            as_typed(self.false_northing.si())
        )
    }
}

fn central_meridian(zone: u8) -> f64 {
    6.0 * f64::from(zone) - 183.0
}

/// The zone of UTM that a place belongs to, with the wider zones of south-west Norway (32V) and
/// Svalbard (31X, 33X, 35X, 37X).
pub(in crate::frames) fn utm_zone(latitude: Angle, longitude: Angle) -> u8 {
    let (lat, lon) = (latitude.in_deg(), within_half_turn(longitude.si()).to_degrees());
    // A conversion to radians and back must not move a site over a zone's edge.
    let lon = lon + 1e-9;
    if (56.0..64.0).contains(&lat) && (3.0..12.0).contains(&lon) {
        return 32;
    }
    if lat >= 72.0 && (0.0..42.0).contains(&lon) {
        return if lon < 9.0 {
            31
        } else if lon < 21.0 {
            33
        } else if lon < 33.0 {
            35
        } else {
            37
        };
    }
    let zone = ((lon + 180.0) / 6.0).floor().rem_euclid(60.0) + 1.0;
    zone as u8
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::prelude::*;

    #[test]
    fn places_have_their_zones() {
        let zone = |lat: f64, lon: f64| utm_zone(lat.deg(), lon.deg());
        assert_eq!([zone(0.0, -180.0), zone(0.0, 179.9), zone(0.0, 180.0), zone(0.0, 0.0)], [1, 60, 1, 31]);
        assert_eq!([zone(60.0, 3.0), zone(60.0, 2.9), zone(55.9, 3.0), zone(64.0, 3.0)], [32, 31, 31, 31]);
        assert_eq!([zone(78.0, 8.0), zone(78.0, 9.0), zone(78.0, 21.0), zone(78.0, 33.0)], [31, 33, 35, 37]);
        assert_eq!([zone(-33.0, 6.0), zone(-33.0, 354.0)], [32, 30]);
    }

    #[test]
    fn a_zone_far_from_the_site_is_refused_with_the_right_one() {
        let at = |lat: f64, lon: f64, zone: u8| Site::at(lat.deg(), lon.deg(), "2026-05-01").unwrap().with_utm(zone);
        let e = at(57.2, 1.8, 30).unwrap_err().to_string();
        assert!(e.contains("4.8° from the zone's central meridian -3°") && e.contains(".with_utm(31)"), "{e}");
        assert!(at(57.2, 1.8, 31).is_ok());
        // A neighbour's zone over the overlap, the wide zone of Norway, the date line.
        assert!(at(52.0, 0.2, 30).is_ok() && at(60.5, 4.0, 32).is_ok() && at(10.0, 179.8, 1).is_ok());
        assert!(at(10.0, 60.0, 0).unwrap_err().is_range() && at(10.0, 60.0, 61).unwrap_err().is_range());
        assert!(at(85.0, 0.0, 31).unwrap_err().to_string().contains("with_convergence"));
        // The same zone can be had all the same by stating the grid.
        let wide = Site::at(57.2.deg(), 1.8.deg(), "2026-05-01").unwrap();
        assert!(wide.with_map_grid(MapGrid::utm(30, false).unwrap()).is_ok());
    }

    #[test]
    fn grids_out_of_range_are_refused_and_named() {
        let site = Site::at(57.2.deg(), 1.8.deg(), "2026-05-01").unwrap();
        let utm = MapGrid::utm(31, false).unwrap();
        let refused = |grid: MapGrid| site.with_map_grid(grid).unwrap_err().to_string();
        assert!(refused(MapGrid { scale: f64::NAN, ..utm }).contains("scale"));
        assert!(refused(MapGrid { scale: 99.96, ..utm }).contains("between 0.9 and 1.1"));
        assert!(refused(MapGrid { central_meridian: 100.deg(), ..utm }).contains("check the signs"));
        let sphere = Ellipsoid { inverse_flattening: f64::INFINITY, ..Ellipsoid::wgs84() };
        assert!(refused(MapGrid { ellipsoid: sphere, ..utm }).contains("inverse flattening"));
        assert!(refused(MapGrid { false_easting: f64::NAN.m(), ..utm }).contains("false easting"));
        assert_eq!(utm.words(), "UTM zone 31 north (WGS 84)");
        assert_eq!(MapGrid { ellipsoid: Ellipsoid::grs80(), ..utm }.words(), "UTM zone 31 north (GRS 1980)");
        let other =
            MapGrid { scale: 1.0, ellipsoid: Ellipsoid { semi_major: 6_378_000.m(), ..Ellipsoid::wgs84() }, ..utm };
        assert!(
            other.words().contains("ellipsoid a = 6378000 m, 1/f = 298.2572236, central meridian 3°"),
            "{}",
            other.words()
        );
    }
}
