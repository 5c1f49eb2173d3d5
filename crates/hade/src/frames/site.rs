//! The place and date of a measurement: what turns azimuths from grid and magnetic north into true
//! ones.

use std::collections::BTreeMap;
use std::sync::{Mutex, PoisonError};

use serde::{Deserialize, Deserializer, Serialize, Serializer};

use super::{Azimuth, Convergence, Date, Declination, MapGrid, Name, North};
use crate::card::{Data, Explain, Item};
use crate::error::{Error, Result};
use crate::units::{Angle, Length, Quantity, as_typed, require_between};

/// Where and when an azimuth was measured. Latitude and longitude are geodetic, north and east
/// positive.
///
/// The declination comes from a model of the Earth's field for the date (WMM2025 from 2025 to 2030,
/// IGRF-14 from 1900 to 2025), the convergence from the map grid; a survey company's own value, once
/// stated, goes before either.
///
/// ```
/// # fn main() -> Result<(), hade::error::Error> {
/// use hade::prelude::*;
/// let site = Site::at(57.2.deg(), 1.8.deg(), "2026-05-01")?.with_utm(31)?;
/// let measured = Azimuth::from_magnetic_north(127.deg());
/// let corrected = site.true_azimuth(measured)?;
/// let added = corrected.true_north()? - measured.measured();
/// assert!((added - site.declination()?.angle).abs() < 1e-9.deg());
/// # Ok(())
/// # }
/// ```
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Site {
    latitude: Angle,
    longitude: Angle,
    date: Date,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    height: Option<Length>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    grid: Option<MapGrid>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    declination: Option<Stated>,
    #[serde(default, skip_serializing_if = "Option::is_none")]
    convergence: Option<Stated>,
}

/// A correction that somebody stated, with where it stands.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Stated {
    /// The angle, east positive.
    pub angle: Angle,
    /// The report, certificate or map it was taken from.
    pub source: Name,
}

/// Nearer to a pole than this latitude (degrees) north is no useful direction.
const NEAREST_TO_POLE: f64 = 89.99;
/// The heights at which the models of the field are used, metres.
const LOWEST: f64 = -12_000.0;
const HIGHEST: f64 = 600_000.0;

impl Site {
    /// A place by geodetic latitude (north positive) and longitude (east positive), and the date of
    /// the measurement as year-month-day ("2026-05-01").
    ///
    /// # Errors
    /// When the latitude is not between −89.99° and 89.99°, the longitude not between −180° and
    /// 360°, or the date cannot be read.
    pub fn at(latitude: Angle, longitude: Angle, date: &str) -> Result<Self> {
        checked_place(latitude, longitude)?;
        let date = Date::read(date)?;
        Ok(Site { latitude, longitude, date, height: None, grid: None, declination: None, convergence: None })
    }

    /// With the height above the ellipsoid (WGS 84), for the declination. Without it the height is
    /// taken as zero and the card says so; 1000 m change a declination by some hundredths of a
    /// degree at most latitudes.
    ///
    /// # Errors
    /// When it is not between −12 km and 600 km.
    pub fn with_height(self, above_ellipsoid: Length) -> Result<Self> {
        checked_height(above_ellipsoid)?;
        Ok(Site { height: Some(above_ellipsoid), ..self })
    }

    /// With the map grid of a UTM zone; the latitude says which hemisphere.
    ///
    /// # Errors
    /// When the zone is not between 1 and 60, the latitude is outside UTM (80° S to 84° N), or the
    /// site lies more than 3.5° from the zone's central meridian and the zone is not its own.
    pub fn with_utm(self, zone: u8) -> Result<Self> {
        self.with_map_grid(MapGrid::utm_at(self.latitude, self.longitude, zone)?)
    }

    /// With any transverse Mercator grid (a national grid, a mine's own grid that was not turned).
    ///
    /// # Errors
    /// When a number of the grid is out of range, or the site lies more than 30° from its central
    /// meridian.
    pub fn with_map_grid(self, grid: MapGrid) -> Result<Self> {
        grid.checked(self.longitude)?;
        Ok(Site { grid: Some(grid), ..self })
    }

    /// With the declination that a survey company states for this place and date, east positive,
    /// and where it stands. It goes before the model's, and the card shows both.
    ///
    /// # Errors
    /// When the angle is not within ±180° or the source has no words.
    pub fn with_declination(self, angle: Angle, source: &str) -> Result<Self> {
        Ok(Site { declination: Some(stated("the magnetic declination", angle, source)?), ..self })
    }

    /// With the grid convergence that a survey company states (angle from true north to grid north,
    /// east positive), and where it stands. It goes before the map grid's, and the card shows both.
    ///
    /// # Errors
    /// When the angle is not within ±180° or the source has no words.
    pub fn with_convergence(self, angle: Angle, source: &str) -> Result<Self> {
        Ok(Site { convergence: Some(stated("the grid convergence", angle, source)?), ..self })
    }

    /// The latitude, north positive.
    pub fn latitude(self) -> Angle {
        self.latitude
    }
    /// The longitude, east positive.
    pub fn longitude(self) -> Angle {
        self.longitude
    }
    /// The date of the measurement.
    pub fn date(self) -> Date {
        self.date
    }
    /// The height above the ellipsoid, if it was stated.
    pub fn height(self) -> Option<Length> {
        self.height
    }
    /// The map grid, if it was stated.
    pub fn map_grid(self) -> Option<MapGrid> {
        self.grid
    }
    pub(super) fn stated_declination(self) -> Option<Stated> {
        self.declination
    }
    pub(super) fn stated_convergence(self) -> Option<Stated> {
        self.convergence
    }

    /// "57.2° N, 1.8° E on 2026-05-01".
    pub fn words(self) -> String {
        format!("{} on {}", place_words(self.latitude, self.longitude), self.date)
    }

    /// The magnetic declination: the angle from true north to magnetic north, east positive.
    ///
    /// # Errors
    /// When nothing was stated and the date lies outside 1900–2030.
    pub fn declination(self) -> Result<Declination> {
        Declination::at(self)
    }

    /// The grid convergence: the angle from true north to grid north, east positive.
    ///
    /// # Errors
    /// When neither a map grid nor a convergence was stated.
    pub fn convergence(self) -> Result<Convergence> {
        Convergence::at(self)
    }

    /// An azimuth brought to true north: grid and magnetic ones by this site's convergence and
    /// declination, which the azimuth then remembers. A true azimuth, and one that has its
    /// correction already, stays as it is.
    ///
    /// # Errors
    /// As [`Site::declination`] for magnetic and [`Site::convergence`] for grid azimuths, and when
    /// the azimuth is not a number within ±360°.
    pub fn true_azimuth(self, azimuth: Azimuth) -> Result<Azimuth> {
        let corrected = match (azimuth.north(), azimuth.correction()) {
            (North::True, _) | (_, Some(_)) => azimuth,
            (north, None) => azimuth.corrected_at(self, self.correction(north)?),
        };
        corrected.true_north()?;
        Ok(corrected)
    }

    /// What is added to an azimuth from a north to make it true.
    pub(super) fn correction(self, north: North) -> Result<Angle> {
        match north {
            North::True => Ok(Angle::default()),
            North::Grid => Ok(self.convergence()?.angle),
            North::Magnetic => Ok(self.declination()?.angle),
        }
    }

    /// The card of the correction from a north.
    pub(crate) fn correction_card(self, north: North) -> Option<crate::card::Card> {
        match north {
            North::True => None,
            North::Grid => self.convergence().ok().map(|c| c.card()),
            North::Magnetic => self.declination().ok().map(|d| d.card()),
        }
    }
}

impl Azimuth {
    /// The same direction as an azimuth from the grid north of a site, to be read off a plan:
    /// grid = true − convergence.
    ///
    /// # Errors
    /// When this azimuth has no true north, or as [`Site::convergence`].
    pub fn to_grid(self, site: Site) -> Result<Azimuth> {
        self.counted_from(North::Grid, site)
    }

    /// The same direction as an azimuth from the magnetic north of a site and date, to be set on a
    /// compass: magnetic = true − declination.
    ///
    /// # Errors
    /// When this azimuth has no true north, or as [`Site::declination`].
    pub fn to_magnetic(self, site: Site) -> Result<Azimuth> {
        self.counted_from(North::Magnetic, site)
    }

    fn counted_from(self, north: North, site: Site) -> Result<Azimuth> {
        let correction = site.correction(north)?;
        let read = Angle::from_si(super::vector::wrap(self.true_north()?.si() - correction.si()));
        let azimuth = match north {
            North::Grid => Azimuth::from_grid_north(read),
            North::Magnetic => Azimuth::from_magnetic_north(read),
            North::True => Azimuth::from_true_north(read),
        };
        Ok(azimuth.corrected_at(site, correction))
    }
}

/// A site that is remembered by many azimuths: kept once for the life of the program, so that an
/// azimuth stays small and can be copied freely.
#[derive(Clone, Copy, Debug, PartialEq)]
pub(super) struct SiteRef(&'static Site);

static SITES: Mutex<BTreeMap<String, &'static Site>> = Mutex::new(BTreeMap::new());

impl SiteRef {
    pub fn new(site: Site) -> Self {
        // The text keeps every bit of every number.
        let key = site.write().text();
        let mut sites = SITES.lock().unwrap_or_else(PoisonError::into_inner);
        SiteRef(sites.entry(key).or_insert_with(|| Box::leak(Box::new(site))))
    }
    pub fn site(self) -> Site {
        *self.0
    }
}
impl Serialize for SiteRef {
    fn serialize<S: Serializer>(&self, s: S) -> std::result::Result<S::Ok, S::Error> {
        self.0.serialize(s)
    }
}
impl<'de> Deserialize<'de> for SiteRef {
    fn deserialize<D: Deserializer<'de>>(d: D) -> std::result::Result<Self, D::Error> {
        Site::deserialize(d).map(SiteRef::new)
    }
}

pub(super) fn checked_place(latitude: Angle, longitude: Angle) -> Result<()> {
    require_between("latitude", latitude, Angle::deg(-NEAREST_TO_POLE), Angle::deg(NEAREST_TO_POLE))?;
    require_between("longitude", longitude, Angle::deg(-180.0), Angle::deg(360.0))?;
    Ok(())
}

pub(super) fn checked_height(height: Length) -> Result<Length> {
    require_between("height above the ellipsoid", height, Length::m(LOWEST), Length::m(HIGHEST))
}

fn stated(what: &str, angle: Angle, source: &str) -> Result<Stated> {
    require_between(what, angle, Angle::deg(-180.0), Angle::deg(180.0))?;
    let source = source.trim();
    if source.is_empty() {
        return Err(Error::undeclared(
            format!("The source of {what} {}° has no words", as_typed(angle.in_deg())),
            "name the report, certificate or map it stands in.",
        ));
    }
    Ok(Stated { angle, source: Name::new(source) })
}

/// The correction that a site gives for a north, as an input of a card that takes it from the site's.
pub(crate) fn correction_item(north: North, correction: Angle) -> Item {
    let (symbol, name) = match north {
        North::Grid => ("γ", "grid convergence of the site, east positive"),
        _ => ("D", "magnetic declination of the site, east positive"),
    };
    let shown = format!("{}°", few_decimals(correction, 4));
    Item::new(symbol, name, Angle::KIND, vec![correction.si()], shown)
}

/// A longitude within ±180°, in radians.
pub(super) fn within_half_turn(angle: f64) -> f64 {
    let wrapped = super::vector::wrap(angle);
    if wrapped > std::f64::consts::PI { wrapped - std::f64::consts::TAU } else { wrapped }
}

/// "57.2° N, 1.8° E".
pub(super) fn place_words(latitude: Angle, longitude: Angle) -> String {
    let longitude = if longitude.in_deg() > 180.0 { longitude - Angle::deg(360.0) } else { longitude };
    let part = |angle: Angle, plus: &str, minus: &str| {
        format!("{}° {}", as_typed(angle.abs().in_deg()), if angle.si() < 0.0 { minus } else { plus })
    };
    format!("{}, {}", part(latitude, "N", "S"), part(longitude, "E", "W"))
}

/// Latitude and longitude as inputs of a card.
pub(super) fn place_items(latitude: Angle, longitude: Angle) -> Vec<Item> {
    let shown = |symbol: &str, name: &str, angle: Angle| {
        Item::new(symbol, name, Angle::KIND, vec![angle.si()], format!("{}°", as_typed(angle.in_deg())))
    };
    vec![shown("φ", "latitude, north positive", latitude), shown("λ", "longitude, east positive", longitude)]
}

/// An angle of a few decimals: as it was typed, or rounded when it was computed.
pub(crate) fn few_decimals(angle: Angle, decimals: usize) -> String {
    let typed = as_typed(angle.in_deg());
    if typed.chars().filter(char::is_ascii_digit).count() > 7 {
        crate::units::fixed(angle.in_deg(), decimals)
    } else {
        typed
    }
}

#[cfg(test)]
mod tests {
    use proptest::prelude::*;

    use super::*;
    use crate::units::{Units, fixed};

    fn site(lat: f64, lon: f64, date: &str) -> Site {
        Site::at(lat.deg(), lon.deg(), date).unwrap()
    }

    #[test]
    fn places_that_are_none_are_refused() {
        let refused = |lat: f64, lon: f64| Site::at(lat.deg(), lon.deg(), "2026-05-01").unwrap_err();
        let e = refused(95.0, 0.0);
        assert!(e.is_range(), "{e}");
        assert_eq!(e.to_string(), "latitude is 95°, but it must be between -89.99° and 89.99°.");
        assert!(refused(-90.0, 0.0).is_range() && refused(10.0, 361.0).is_range() && refused(10.0, -181.0).is_range());
        assert!(refused(f64::NAN, 0.0).is_range() && refused(0.0, f64::NAN).is_range());
        assert!(Site::at(10.deg(), 10.deg(), "May 2026").unwrap_err().to_string().contains("2026-05-01"));
        let there = site(10.0, 10.0, "2026-05-01");
        assert!(there.with_height(700_000.m()).unwrap_err().is_range());
        assert!(there.with_height(f64::NAN.m()).unwrap_err().is_range());
        assert!(there.with_declination(200.deg(), "report").unwrap_err().is_range());
        assert!(there.with_declination(f64::NAN.deg(), "report").unwrap_err().is_range());
        assert!(there.with_convergence(1.deg(), "  ").unwrap_err().to_string().contains("has no words"));
        assert_eq!(there.words(), "10° N, 10° E on 2026-05-01");
        assert_eq!(site(-33.5, 300.25, "2026-05-01").words(), "33.5° S, 59.75° W on 2026-05-01");
    }

    #[test]
    fn is_written_and_read_with_every_bit_and_kept_once() {
        let plain = site(57.1, -1.7, "2026-05-01");
        let whole = plain
            .with_height(0.1.m())
            .unwrap()
            .with_utm(30)
            .unwrap()
            .with_declination(0.3.deg(), "report 1")
            .unwrap()
            .with_convergence(1.1.deg(), "plan 1")
            .unwrap();
        for site in [plain, whole] {
            assert_eq!(Site::read(&site.write()).unwrap(), site);
            assert!(std::ptr::eq(SiteRef::new(site).0, SiteRef::new(site).0));
        }
        assert!(!std::ptr::eq(SiteRef::new(plain).0, SiteRef::new(whole).0));
        assert!(std::mem::size_of::<Azimuth>() <= 56, "an azimuth stays small");
        // An azimuth without a site is written as it always was.
        let text = Azimuth::from_true_north(35.deg()).write().text();
        assert!(!text.contains("site"), "{text}");
        // A record with a place that is none does not get a card.
        let forged = plain.write().with_number("/latitude", 1.7);
        assert!(Site::read(&forged).unwrap().declination().unwrap_err().is_range());
    }

    #[test]
    fn the_height_not_stated_is_an_assumption_of_the_card() {
        let card = site(57.2, 1.8, "2026-05-01").declination().unwrap().card();
        assert!(card.explanation.method.assumptions.iter().any(|a| a.contains("not stated and is taken as 0 m")));
        let stated = site(57.2, 1.8, "2026-05-01").with_height(40.m()).unwrap().declination().unwrap().card();
        assert!(stated.explanation.method.assumptions.iter().all(|a| !a.contains("not stated")));
        assert!(stated.explanation.inputs.iter().any(|i| i.symbol == "h" && i.si == [40.0]));
    }

    #[test]
    fn a_sheet_follows_a_correction_to_the_givens() {
        use crate::prelude::*;
        let mut sheet = Sheet::new("test");
        for place in [57.2, 57.25] {
            let lat = sheet.given("φ", "latitude", place.deg(), Source::measured("location survey"));
            let lon = sheet.given("λ", "longitude", 1.8.deg(), Source::measured("location survey"));
            let site = Site::at(lat, lon, "2026-05-01").unwrap();
            let needle = Azimuth::from_magnetic_north(127.deg());
            let breakout = sheet.given("A_b", "breakout azimuth", needle, Source::measured("image log"));
            let across = site.true_azimuth(breakout).unwrap().perpendicular();
            let stress = Stress::from_horizontals(Horizontals {
                sv: sheet.given("S_v", "vertical stress", 66.9.mpa(), Source::measured("density log")),
                sh_max: sheet.given("S_H", "larger horizontal stress", 58.2.mpa(), Source::assumed("breakouts")),
                sh_min: sheet.given("S_h", "smaller horizontal stress", 47.1.mpa(), Source::measured("leak-off")),
                sh_max_azimuth: across,
            });
            sheet.add(&stress.unwrap().principals());
        }
        let record = sheet.record();
        assert_eq!(record.unknown_inputs(), vec![], "{:#?}", record.unknown_inputs());
        let kinds: Vec<String> = record.cards().iter().map(|(c, _)| c.kind.clone()).collect();
        assert_eq!(kinds, ["magnetic-declination", "azimuth-to-true-north", "stress-tensor", "principal-stresses"]);
    }

    #[test]
    fn one_degree_of_a_wrong_sign_is_two_degrees_of_azimuth() {
        // East declination: a needle that reads 127° points to 130° when it leans 3° to the east.
        let east = site(57.2, 1.8, "2026-05-01").with_declination(3.deg(), "report").unwrap();
        let bearing = |site: Site, a: Azimuth| site.true_azimuth(a).unwrap().true_north().unwrap().in_deg();
        assert_eq!(fixed(bearing(east, Azimuth::from_magnetic_north(127.deg())), 9), "130.000000000");
        let grid = east.with_convergence((-2).deg(), "plan").unwrap();
        assert_eq!(fixed(bearing(grid, Azimuth::from_grid_north(1.deg())), 9), "359.000000000");
        // Grid and magnetic bearings of one line: grid = magnetic + D − γ.
        let needle = grid.true_azimuth(Azimuth::from_magnetic_north(127.deg())).unwrap();
        assert_eq!(fixed(needle.to_grid(grid).unwrap().measured().in_deg(), 9), "132.000000000");
    }

    proptest! {
        #[test]
        fn an_azimuth_stays_within_a_circle_and_is_the_sum_of_its_parts(
            a in -360.0..=360.0_f64, correction in -180.0..=180.0_f64, turn in -720.0..720.0_f64,
        ) {
            let azimuth = Azimuth::from_magnetic_north(a.deg()).with_declination(correction.deg()).unwrap();
            let bearing = azimuth.turned_by(turn.deg()).true_north().unwrap().in_deg();
            prop_assert!((0.0..360.0).contains(&bearing), "{bearing}");
            let off = (bearing - a - correction - turn).rem_euclid(360.0);
            prop_assert!(off.min(360.0 - off) < 1e-9, "{off}");
        }

        #[test]
        fn true_to_magnetic_and_grid_and_back_is_the_same_direction(
            lat in -79.0..83.0_f64, lon in -180.0..360.0_f64, off in -3.0..3.0_f64, a in 0.0..360.0_f64,
            year in 1900..2030_i32, day in 1..=28_i32, month in 1..=12_i32, height in -3000.0..9000.0_f64,
        ) {
            let date = format!("{year}-{month:02}-{day:02}");
            let cm = MapGrid { central_meridian: lon.deg(), ..MapGrid::utm(31, lat < 0.0).unwrap() };
            let lon = (lon + off).clamp(-180.0, 360.0);
            let site = site(lat, lon, &date).with_height(height.m()).unwrap().with_map_grid(cm).unwrap();
            let azimuth = Azimuth::from_true_north(a.deg());
            for there in [azimuth.to_magnetic(site).unwrap(), azimuth.to_grid(site).unwrap()] {
                let read = match there.north() {
                    North::Magnetic => Azimuth::from_magnetic_north(there.measured()),
                    _ => Azimuth::from_grid_north(there.measured()),
                };
                let back = site.true_azimuth(read).unwrap().true_north().unwrap();
                let gap = within_half_turn(back.si() - a.to_radians()).abs();
                prop_assert!(gap < 1e-12, "{gap}");
                prop_assert!(there.measured().si() >= 0.0 && there.measured().in_deg() < 360.0);
            }
            // The convergence has the sign of the offset north of the equator, and the other south of it.
            let gamma = site.convergence().unwrap();
            prop_assert!(gamma.angle.si() * off * lat >= -1e-12);
            prop_assert!(gamma.card().passed());
            let d = site.declination().unwrap();
            prop_assert!(d.card().passed(), "{:#?}", d.card().checks);
            let field = d.field.unwrap();
            prop_assert!(field.total.in_nt() > 15_000.0 && field.total.in_nt() < 75_000.0, "{}", field.total);
        }
    }
}
