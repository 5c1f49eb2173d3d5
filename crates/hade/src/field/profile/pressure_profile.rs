//! A pressure or stress against depth, as it was stated or read.

use std::path::Path;
use std::sync::Arc;

use super::about::{ProfileAbout, ProfileSource};
use super::at_depth::PressureAtDepth;
use super::law::{Law, Start};
use super::points::Points;
use crate::card::Item;
use crate::error::{Error, Result};
use crate::frames::{Datum, DatumTie, Depth, Name};
use crate::sheet::IntoGiven;
use crate::units::{Density, Gradient, Length, Pressure, Quantity, with_typed_unit};

/// A pressure or a stress (pore pressure, S_v, S_Hmax, S_hmin, fracture pressure) against true
/// vertical depth: a table with straight lines between its points, or a gradient from a level down.
/// It says which level its depths count from; nothing is extrapolated. Copies are cheap: they share
/// the points.
#[derive(Clone, Debug, PartialEq)]
pub struct PressureProfile {
    data: Arc<ProfileData>,
}

#[derive(Clone, Debug, PartialEq)]
pub(super) struct ProfileData {
    pub about: ProfileAbout,
    pub law: Law,
}

/// A table that is typed holds no more points than this, so that the record can hold it.
const MOST_TYPED: usize = 2000;

impl PressureProfile {
    /// A table of at most 2000 points, in order of true vertical depth below a datum; straight lines
    /// run between them.
    ///
    /// # Errors
    /// With fewer than two points or more than 2000, depths that do not rise or lie beyond 20 km, or
    /// pressures that are not finite or beyond 2 GPa.
    pub fn from_points(points: &[(Length, Pressure)], datum: Datum) -> Result<Self> {
        if points.len() > MOST_TYPED {
            return Err(Error::out_of_range(
                "the number of points of a typed table",
                points.len().to_string(),
                format!("at most {MOST_TYPED}, so that the record can hold them; put a longer table into a file"),
            ));
        }
        Ok(PressureProfile::build(
            ProfileAbout::typed("P", "pressure"),
            Law::Table(Points::new(datum, points.to_vec())?),
        ))
    }

    /// A gradient from a level down: `pressure` at `from`, growing by `gradient` with depth below it.
    /// The gradient counts from that level, not from another one that lies nearer to hand.
    ///
    /// # Errors
    /// When a number is not finite, the gradient negative, the level beyond 20 km or the pressure
    /// beyond 2 GPa.
    pub fn from_gradient(gradient: Gradient, from: Depth, pressure: Pressure) -> Result<Self> {
        let law = Law::gradient(from, Start::Stated { pressure }, gradient)?;
        Ok(PressureProfile::build(ProfileAbout::typed("P", "pressure"), law))
    }

    /// At sea: a gradient from the mudline down, on top of the weight of the sea from mean sea level
    /// to the mudline. The depth of the sea comes with the levels of the hole ([`Self::tied`]).
    ///
    /// # Errors
    /// When a number is not finite, the gradient is negative, or the density outside 990–1300 kg/m³.
    pub fn from_mudline(gradient: Gradient, sea_water: Density) -> Result<Self> {
        let from = Depth::below_mudline(Length::default());
        let law = Law::gradient(from, Start::Sea { density: sea_water }, gradient)?;
        Ok(PressureProfile::build(ProfileAbout::typed("P", "pressure"), law))
    }

    /// Reads one column of a CSV file. Lines that begin with `#` above the column names declare what
    /// a table of numbers cannot say; keys in any order and case, free remarks allowed:
    ///
    /// ```text
    /// # hole: KF-1                          (optional)
    /// # datum: rotary table                 (or mean sea level, ground, mudline; also as depth_datum)
    /// # depth_unit: m | ft
    /// # pressure_unit: MPa | kPa | Pa | bar | psi
    /// # rotary_table_above_msl: 32.4 m      (optional; also ground_above_msl, mudline_above_msl)
    /// tvd,pore_pressure,sh_min
    /// ```
    ///
    /// Units may stand in the column names instead: `tvd (m),sh_min (psi)`. Depths are true vertical
    /// ones, in a column `tvd`. Further columns are ignored. At most 100 000 rows.
    ///
    /// # Errors
    /// With file, line, column and what to change: no such file, no text, empty, an undeclared datum
    /// or unit, a missing column, decimal commas or semicolons, a word or nothing where a number is
    /// needed, and everything [`PressureProfile::from_points`] refuses.
    pub fn read_csv(path: impl AsRef<Path>, column: &str) -> Result<Self> {
        super::read::read_csv(path.as_ref(), column)
    }

    pub(super) fn from_file(
        law: Law,
        column: &str,
        hole: Option<Name>,
        tie: Option<DatumTie>,
        source: ProfileSource,
    ) -> Self {
        let meaning = column.trim().to_owned();
        let about = ProfileAbout {
            meaning,
            hole,
            source,
            tie,
            tie_in_file: tie.is_some(),
            ..ProfileAbout::typed("P", "pressure")
        };
        PressureProfile::build(about, law)
    }

    pub(super) fn build(about: ProfileAbout, law: Law) -> Self {
        PressureProfile { data: Arc::new(ProfileData { about, law }) }
    }

    fn changed(&self, change: impl FnOnce(&mut ProfileAbout)) -> Self {
        let mut about = self.data.about.clone();
        change(&mut about);
        PressureProfile::build(about, self.data.law.clone())
    }

    /// Under a symbol and what it means: `.of("S_hmin", "smaller horizontal stress")`. Cards use both.
    pub fn of(&self, symbol: &str, meaning: &str) -> Self {
        self.changed(|about| {
            symbol.clone_into(&mut about.symbol);
            meaning.clone_into(&mut about.meaning);
        })
    }

    /// Under the name of the hole it belongs to.
    pub fn named(&self, hole: &str) -> Self {
        self.changed(|about| about.hole = Some(Name::new(hole)))
    }

    /// With the levels of its hole, so that a depth below any of them can be asked for.
    ///
    /// # Errors
    /// When the file states other levels.
    pub fn tied(&self, tie: DatumTie) -> Result<Self> {
        let about = self.data.about.clone().tied(tie)?;
        Ok(PressureProfile::build(about, self.data.law.clone()))
    }

    /// The same for another hole with its own levels: a depth of that hole is carried over at equal
    /// elevation above mean sea level, and mud weights refer to its rotary table. That a pressure is
    /// the same at equal elevation is a choice, and the card says so.
    pub fn carried_to(&self, hole: DatumTie) -> Self {
        self.changed(|about| about.other_hole = Some(hole))
    }

    /// The level its depths count from.
    pub fn datum(&self) -> Datum {
        self.data.law.datum()
    }

    /// The depths it covers, below its datum; a gradient has no lower end.
    pub fn covers(&self) -> (Length, Option<Length>) {
        match &self.data.law {
            Law::Table(Points { ends: [first, last], .. }) => (*first, Some(*last)),
            Law::Gradient { from, .. } => (from.tvd, None),
        }
    }

    /// The pressure at a depth, with its card.
    ///
    /// # Errors
    /// When the depth lies outside what the profile covers (nothing is extrapolated), or counts from
    /// another level than the profile and the elevation of one of the two was not stated.
    pub fn at(&self, depth: Depth) -> Result<PressureAtDepth> {
        PressureAtDepth::of(self, depth)
    }

    pub(super) fn data(&self) -> &ProfileData {
        &self.data
    }
}

/// A whole profile as one value: depths and pressures of a table in turn; where a gradient begins,
/// the pressure (or the density of the sea) there, and the gradient.
pub(super) fn whole_item(about: &ProfileAbout, law: &Law) -> Item {
    let below = law.datum().words();
    let hole = about.hole.map(|name| format!(" of {name}")).unwrap_or_default();
    match law {
        Law::Table(Points { points, count, ends: [first, last], .. }) => Item::new(
            &about.symbol,
            format!("{} against depth{hole}", about.meaning),
            format!("pressure against depth below {below}"),
            points.iter().flat_map(|(z, p)| [z.si(), p.si()]).collect(),
            format!("{count} points, TVD {} to {} below {below}", with_typed_unit(*first), with_typed_unit(*last)),
        ),
        Law::Gradient { from, start, gradient } => {
            let (begin, words) = match start {
                Start::Stated { pressure } => (pressure.si(), format!("{} there", with_typed_unit(*pressure))),
                Start::Sea { density } => (density.si(), format!("under sea water of {}", with_typed_unit(*density))),
            };
            Item::new(
                &about.symbol,
                format!("{} against depth{hole}", about.meaning),
                format!("pressure gradient from a depth below {below}"),
                vec![from.tvd.si(), begin, gradient.si()],
                format!("{} from {}, {words}", with_typed_unit(*gradient), from.words()),
            )
        }
    }
}

impl PressureProfile {
    /// "pore pressure against depth of KF-1: 6 points, TVD 2200 m to 3100 m below the rotary table".
    pub(crate) fn words(&self) -> String {
        let item = whole_item(&self.data.about, &self.data.law);
        format!("{}: {}", item.name, item.shown)
    }
}

impl IntoGiven for PressureProfile {
    type Value = PressureProfile;
    /// As one given; the profile takes over the symbol and the meaning.
    fn into_given(self, symbol: &str, meaning: &str) -> (PressureProfile, Item, Option<(f64, String)>) {
        let given = self.of(symbol, meaning).changed(|about| about.one_given = true);
        let item = whole_item(&given.data.about, &given.data.law);
        (given, Item { name: meaning.to_owned(), ..item }, None)
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::card::{Explain, Standing};
    use crate::frames::Azimuth;
    use crate::sheet::{Entry, Origin, Sheet, Source};
    use crate::stress::{Horizontals, Stress};
    use crate::units::Units;
    use crate::well::{Station, Survey};

    fn sea() -> DatumTie {
        DatumTie::rotary_table_at(25.m()).unwrap().with_mudline_at((-300).m()).unwrap()
    }
    fn table() -> PressureProfile {
        PressureProfile::from_points(&[(1000.m(), 12.mpa()), (2000.m(), 24.mpa())], Datum::RotaryTable).unwrap()
    }
    fn refused(profile: &PressureProfile, depth: Depth) -> String {
        profile.at(depth).unwrap_err().to_string()
    }

    #[test]
    fn straight_lines_run_between_points_and_points_are_met() {
        assert_eq!(table().at(Depth::below_rotary_table(1250.m())).unwrap().pressure, 15.mpa());
        let points = [(0.1.m(), 0.3.mpa()), (0.7.m(), 0.1.mpa()), (9.9.m(), 7.7.mpa())];
        let profile = PressureProfile::from_points(&points, Datum::Ground).unwrap();
        for (z, p) in points {
            assert_eq!(profile.at(Depth::below_ground(z)).unwrap().pressure, p);
        }
    }

    #[test]
    fn nothing_is_extrapolated_and_the_message_names_what_is_covered() {
        assert_eq!(
            refused(&table(), Depth::below_rotary_table(2500.m())),
            "the depth asked for is 2500 m below the rotary table, but it must be between 1000 m and 2000 m, the ends of the table (nothing is extrapolated)."
        );
        assert!(refused(&table(), Depth::below_rotary_table(999.9.m())).contains("1000 m"));
        let gradient = PressureProfile::from_gradient(10.mpa_per_km(), Depth::below_ground(50.m()), 1.mpa()).unwrap();
        let e = refused(&gradient, Depth::below_ground(49.m()));
        assert!(e.contains("at or below 50 m, where the gradient begins"), "{e}");
        assert_eq!(gradient.covers(), (50.m(), None));
        assert!(table().at(Depth::below_rotary_table(f64::NAN.m())).is_err());
    }

    #[test]
    fn a_depth_from_an_untied_level_is_refused_and_told_how_to_tie_it() {
        let e = refused(&table(), Depth::below_mudline(1000.m()));
        assert!(e.contains("not tied together") && e.contains(".tied("), "{e}");
        let rotary_only = table().tied(DatumTie::rotary_table_at(25.m()).unwrap()).unwrap();
        assert!(refused(&rotary_only, Depth::below_mudline(1000.m())).contains("with_mudline_at"));
        assert!(table().tied(sea()).unwrap().at(Depth::below_mudline(1000.m())).is_ok());
        let under_sea = PressureProfile::from_mudline(10.mpa_per_km(), 1025.kg_m3()).unwrap();
        assert!(refused(&under_sea, Depth::below_mudline(10.m())).contains("how deep the sea is"));
    }

    /// The mud weight counts from the rotary table whatever the table counts from.
    #[test]
    fn mud_weights_refer_to_the_rotary_table() {
        let points = [(600.m(), 12.mpa()), (700.m(), 13.mpa())];
        let below_mudline = PressureProfile::from_points(&points, Datum::Mudline).unwrap();
        let untied = below_mudline.at(Depth::below_mudline(675.m())).unwrap();
        assert_eq!((untied.mud_weight, untied.gradient), (None, None));
        assert!(untied.card().passed());
        assert!(untied.card().explanation.notes[0].contains("rotary table"));
        let tied = below_mudline.tied(sea()).unwrap().at(Depth::below_mudline(675.m())).unwrap();
        assert_eq!(tied.pressure, 12.75.mpa());
        // 12.75 MPa / (9.80665 · 1000 m) = 1300.14 kg/m³, where 675 m would give 1926.
        assert!((tied.mud_weight.unwrap().in_kg_m3() - 1300.138).abs() < 1e-3);
        assert_eq!(tied.gradient.unwrap(), 12.75.mpa_per_km());
        let above = PressureProfile::from_gradient(10.mpa_per_km(), Depth::below_mean_sea_level((-25).m()), 0.mpa());
        let at_table = above.unwrap().tied(sea()).unwrap().at(Depth::below_rotary_table(0.m())).unwrap();
        assert_eq!((at_table.pressure, at_table.mud_weight), (0.mpa(), None));
        assert!(at_table.card().passed());
    }

    /// 22.6 MPa/km from the mudline on top of the sea, against the sum worked out by hand.
    #[test]
    fn a_gradient_from_the_mudline_stands_on_the_sea() {
        let profile = PressureProfile::from_mudline(22.6.mpa_per_km(), 1025.kg_m3()).unwrap().tied(sea()).unwrap();
        let at = profile.at(Depth::below_rotary_table(1325.m())).unwrap();
        // 1025 · 9.80665 · 300 = 3 015 544.875 Pa; 22.6 MPa below 1000 m of rock.
        assert!((at.pressure - 25_615_544.875.pa()).abs() < 1e-6.pa());
        assert!(at.card().passed());
        assert_eq!(profile.at(Depth::below_mudline(0.m())).unwrap().pressure, 1025.kg_m3().column(300.m()));
    }

    #[test]
    fn another_hole_is_reached_at_equal_elevation() {
        let land = DatumTie::rotary_table_at(432.m()).unwrap();
        let own = DatumTie::rotary_table_at(32.m()).unwrap();
        let profile = table().tied(own).unwrap().carried_to(land);
        let at = profile.at(Depth::below_rotary_table(1900.m())).unwrap();
        assert_eq!(at.pressure, 18.mpa());
        assert!((at.mud_weight.unwrap() - 18.mpa().mud_weight_at(1900.m())).abs() < 1e-9.kg_m3());
        let card = at.card();
        assert!(card.passed());
        assert!(card.explanation.notes[0].contains("equal elevation"));
        assert!(refused(&table().carried_to(land), Depth::below_rotary_table(1900.m())).contains("not tied together"));
    }

    #[test]
    fn what_cannot_be_a_profile_is_refused() {
        let of = |points: &[(Length, Pressure)]| {
            PressureProfile::from_points(points, Datum::Ground).unwrap_err().to_string()
        };
        assert!(of(&[(1.m(), 1.mpa())]).contains("is 1, but it must be two or more"));
        assert!(of(&[(1.m(), 1.mpa()), (1.m(), 2.mpa())]).contains("stands twice"));
        assert!(of(&[(2.m(), 1.mpa()), (1.m(), 2.mpa())]).contains("sort the table"));
        assert!(of(&[(2.m(), 1.mpa()), (f64::NAN.m(), 2.mpa())]).contains("depth of the table"));
        assert!(of(&[(2.m(), 1.mpa()), (3.m(), f64::NAN.mpa())]).contains("pressure of the table"));
        assert!(of(&[(0.m(), 1.mpa()); 2001]).contains("at most 2000"));
        let begin = Depth::below_ground(0.m());
        assert!(PressureProfile::from_gradient((-1).mpa_per_km(), begin, 0.mpa()).is_err());
        assert!(PressureProfile::from_gradient(f64::NAN.mpa_per_km(), begin, 0.mpa()).is_err());
        assert!(PressureProfile::from_gradient(1.mpa_per_km(), begin, f64::INFINITY.mpa()).is_err());
        assert!(PressureProfile::from_mudline(1.mpa_per_km(), 1.kg_m3()).is_err());
        let tied = table().tied(sea()).unwrap();
        assert!(tied.tied(DatumTie::rotary_table_at(1.m()).unwrap()).is_ok());
    }

    /// From a measured depth through the survey, the datum and the tables to the tensor: every value
    /// of the sheet is followed.
    #[test]
    fn lineage_runs_from_the_measured_depth_to_the_tensor() {
        let mut sheet = Sheet::new("KF-9");
        let source = || Source::measured("test");
        let station = |md: f64, i: f64| Station {
            md: md.m(),
            inclination: i.deg(),
            azimuth: Azimuth::from_true_north(120.deg()),
        };
        let survey = Survey::from_stations(&[station(0.0, 0.0), station(1000.0, 20.0), station(2500.0, 40.0)]).unwrap();
        let survey = sheet.given("V", "survey", survey.named("KF-9"), source());
        let rotary = sheet.given("e_RT", "rotary table above mean sea level", 25.m(), source());
        let mudline = sheet.given("e_M", "mudline above mean sea level", (-300).m(), source());
        let tie = DatumTie::rotary_table_at(rotary).unwrap().with_mudline_at(mudline).unwrap();
        let md = sheet.given("MD", "measured depth", 2000.m(), source());
        let position = survey.tied(tie).unwrap().at(md).unwrap();
        let depth = position.conversion(Datum::Mudline).unwrap();
        sheet.add(&depth);
        let points = [(500.m(), 9.mpa()), (2000.m(), 36.123.mpa())];
        let table = PressureProfile::from_points(&points, Datum::Mudline).unwrap().tied(tie).unwrap();
        let sh_min = sheet.given("S_hmin", "smaller horizontal stress", table, source()).at(depth.depth()).unwrap();
        let g_v = sheet.given("G_0", "gradient of the vertical stress", 21.7.mpa_per_km(), source());
        let water = sheet.given("ρ_w", "density of the sea", 1025.kg_m3(), source());
        let sv = PressureProfile::from_mudline(g_v, water).unwrap().of("S_v", "vertical stress").tied(tie).unwrap();
        let sv = sv.at(depth.depth()).unwrap();
        let table = sheet.given(
            "S_Hmax",
            "larger horizontal stress",
            PressureProfile::from_gradient(25.mpa_per_km(), Depth::below_mudline(0.m()), 3.mpa()).unwrap(),
            source(),
        );
        let sh_max = table.tied(tie).unwrap().at(depth.depth()).unwrap();
        for result in [&sh_min, &sv, &sh_max] {
            sheet.add(result);
        }
        let azimuth = sheet.given("A", "azimuth of S_Hmax", Azimuth::from_true_north(30.deg()), source());
        let stress = Stress::from_horizontals(Horizontals {
            sv: sv.pressure,
            sh_max: sh_max.pressure,
            sh_min: sh_min.pressure,
            sh_max_azimuth: azimuth,
        })
        .unwrap();
        sheet.add(&stress);
        let mut from_cards = 0;
        let mut kinds = Vec::new();
        for entry in sheet.record().entries {
            let Entry::Card { card, lineage, .. } = entry else { continue };
            kinds.push(card.kind.clone());
            for (item, origin) in card.explanation.inputs.iter().zip(&lineage) {
                assert!(origin.is_known(), "{}: {} is {origin:?}", card.title(), item.name);
                assert!(item.standing == Standing::Value, "{}", item.name);
                from_cards += usize::from(matches!(origin, Origin::Outcome { .. }));
            }
        }
        // z and its conversion, the three depths, the three stresses.
        assert_eq!(
            kinds,
            [
                "survey-position",
                "depth-conversion",
                "pressure-at-depth",
                "pressure-at-depth",
                "pressure-at-depth",
                "stress-tensor"
            ]
        );
        assert!(from_cards >= 7, "{from_cards}");
    }
}
