//! The total vertical stress: the weight of rock (and sea) above a depth, from a density log.

use serde::{Deserialize, Serialize};

use super::column::{SEA_WATER, require_rock};
use super::density_log::{DensityLog, Gap, LogAbout};
use super::overburden_card::explain;
use super::reduce::{MOST_LAYERS, layers};
use crate::card::{Check, Explain, Explanation};
use crate::error::{Error, Result};
use crate::frames::{Datum, DatumTie, Depth};
use crate::units::{Density, GRAVITY, Gradient, Length, Pressure, Quantity, with_typed_unit};

/// What is asked of a density log.
#[derive(Clone, Copy, Debug, PartialEq)]
pub struct OverburdenInputs {
    /// The depth at which the stress is wanted, with its datum.
    pub depth: Depth,
    /// The levels of the hole that depth belongs to. It need not be the log's own hole: the depth is
    /// carried over at equal elevation.
    pub hole: DatumTie,
    /// What lies between the surface and the first value of the log.
    pub top: Top,
}

/// What lies above the first value of a log. It is never assumed: a log begins below the surface,
/// and what it leaves out weighs several MPa.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
#[serde(tag = "top", rename_all = "snake_case")]
pub enum Top {
    /// On land: rock of a mean density from the ground down to the first value.
    Land {
        /// Its mean bulk density.
        mean_density: Density,
    },
    /// At sea: sea water (1025 kg/m³) from mean sea level to the mudline, then rock of a mean
    /// density down to the first value.
    Sea {
        /// The mean bulk density of that rock.
        mean_density: Density,
    },
}

impl Top {
    pub(super) fn mean_density(self) -> Density {
        match self {
            Top::Land { mean_density } | Top::Sea { mean_density } => mean_density,
        }
    }
    pub(super) fn surface(self) -> Datum {
        match self {
            Top::Land { .. } => Datum::Ground,
            Top::Sea { .. } => Datum::Mudline,
        }
    }
}

/// A layer of the reduced log: mean density between two depths below the log's datum.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct Layer {
    /// Its top.
    pub top: Length,
    /// Its bottom.
    pub bottom: Length,
    /// The mean density of the log in it.
    pub density: Density,
}

/// The total vertical stress at a depth, with the column it was summed from.
#[derive(Clone, Debug, PartialEq)]
#[non_exhaustive]
pub struct Overburden {
    /// The total vertical stress S_v.
    pub stress: Pressure,
    /// Its mean gradient over the depth below the rotary table of the hole.
    pub gradient: Gradient,
    /// The mean density of the rock from the surface (ground or mudline) down to the depth.
    pub mean_density: Density,
    log_depth: Length,
    top_stress: Pressure,
    record: OverburdenRecord,
}

/// The inputs as the record holds them: the log reduced to at most forty layers that weigh exactly
/// what it weighs, its file hash, and what was stated.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct OverburdenRecord {
    pub(super) about: LogAbout,
    pub(super) log_tie: DatumTie,
    pub(super) depth: Depth,
    pub(super) hole: DatumTie,
    pub(super) top: Top,
    pub(super) layers: Vec<Layer>,
    /// How many samples the layers were made from.
    pub(super) samples: u64,
    /// The weight of the log from its first value to the depth, summed sample by sample.
    pub(super) whole_log: Pressure,
    pub(super) bridged: Option<Length>,
    pub(super) gaps: Vec<Gap>,
}

/// What came out, in SI.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub struct OverburdenOutcome {
    stress: Pressure,
    gradient: Gradient,
    mean_density: Density,
    /// The depth below the log's datum.
    log_depth: Length,
    /// The stress at the first value of the log.
    top_stress: Pressure,
}

impl OverburdenRecord {
    /// The depth asked for, below the datum of the log, at equal elevation.
    pub(super) fn log_depth(&self) -> Result<Length> {
        let sea = self.hole.convert(self.depth, Datum::MeanSeaLevel)?;
        Ok(self.log_tie.convert(sea, self.about.datum)?.tvd)
    }
    /// The surface of the rock, below the datum of the log.
    pub(super) fn surface(&self) -> Result<Length> {
        let surface = Depth { tvd: Length::default(), below: self.top.surface() };
        Ok(self.log_tie.convert(surface, self.about.datum)?.tvd)
    }
    /// The depth of the sea.
    pub(super) fn water(&self) -> Result<Length> {
        match self.top {
            Top::Land { .. } => Ok(Length::default()),
            Top::Sea { .. } => Ok(-self.log_tie.elevation(Datum::Mudline)?),
        }
    }
    /// The depth asked for below the rotary table of its hole.
    pub(super) fn below_rotary(&self) -> Result<Length> {
        Ok(self.hole.convert(self.depth, Datum::RotaryTable)?.tvd)
    }
    pub(super) fn first_sample(&self) -> Length {
        self.layers.first().map_or(Length::m(f64::NAN), |l| l.top)
    }
}

impl Overburden {
    pub(super) fn of_log(log: &DensityLog, inputs: OverburdenInputs) -> Result<Self> {
        let data = log.data();
        let mut record = OverburdenRecord {
            about: data.about.clone(),
            log_tie: log.tie()?,
            depth: inputs.depth,
            hole: inputs.hole,
            top: inputs.top,
            layers: Vec::new(),
            samples: 0,
            whole_log: Pressure::default(),
            bridged: None,
            gaps: Vec::new(),
        };
        let to = record.log_depth()?;
        let (first, last) = log.range();
        if !(to > first && to <= last) {
            return Err(Error::out_of_range(
                "the depth asked for",
                format!("{to} below the datum of the log"),
                format!("below {first} and not below {last}, the ends of the log (nothing is extrapolated)"),
            ));
        }
        let above: Vec<Gap> = data.gaps.iter().copied().filter(|gap| gap.top < to).collect();
        let allowed = data.bridged.unwrap_or_default();
        if let Some(gap) = above.iter().find(|gap| gap.length() > allowed) {
            return Err(Error::not_physical(
                format!("The log has no values from {} to {}", with_typed_unit(gap.top), with_typed_unit(gap.bottom)),
                format!(
                    "{} gaps lie above the depth asked for; allow straight lines across them with .bridge_gaps_up_to({}.m())?, or fill them.",
                    above.len(),
                    gap.length().si().ceil()
                ),
            ));
        }
        let (layers, weight) = layers(&data.depths, &data.densities, to.si());
        record.layers = layers;
        record.samples = data.depths.partition_point(|z| *z <= to.si()) as u64;
        record.whole_log = Pressure::from_si(weight * GRAVITY);
        record.bridged = data.bridged.filter(|_| !above.is_empty());
        record.gaps = above.into_iter().take(MOST_LAYERS).collect();
        Overburden::compute(record)
    }

    /// The layers the log was reduced to, below its datum.
    pub fn layers(&self) -> Vec<Layer> {
        self.record.layers.clone()
    }

    /// The depth asked for.
    pub fn depth(&self) -> Depth {
        self.record.depth
    }

    pub(super) fn record(&self) -> &OverburdenRecord {
        &self.record
    }
    pub(super) fn log_depth(&self) -> Length {
        self.log_depth
    }
    pub(super) fn top_stress(&self) -> Pressure {
        self.top_stress
    }
}

/// Depths that must meet may differ by this, metres.
const MEET: f64 = 1e-6;

impl Explain for Overburden {
    const KIND: &'static str = "overburden";
    type Inputs = OverburdenRecord;
    type Outcome = OverburdenOutcome;

    fn compute(record: OverburdenRecord) -> Result<Self> {
        require_rock(record.top.mean_density())?;
        let (log_depth, surface, water) = (record.log_depth()?, record.surface()?, record.water()?);
        let first = record.first_sample();
        let last = record.layers.last().map_or(f64::NAN, |l| l.bottom.si());
        let reached_depth = (last - log_depth.si()).abs() < MEET;
        if record.layers.len() > MOST_LAYERS || !reached_depth {
            return Err(Error::not_physical(
                "The layers of a density log",
                "they do not reach the depth asked for; make the record again.",
            ));
        }
        if first < surface {
            return Err(Error::not_physical(
                format!("The first value of the log, at {first} below its datum"),
                format!(
                    "it lies above {}, at {surface}; check the datum and the levels of the log.",
                    record.top.surface().words()
                ),
            ));
        }
        let mut rock = record.top.mean_density().si() * (first - surface).si();
        let top_stress = GRAVITY * (SEA_WATER * water.si() + rock);
        let mut reached = first;
        for layer in &record.layers {
            require_rock(layer.density)?;
            let thickness = (layer.bottom - layer.top).finite("thickness of a layer")?;
            if layer.top != reached || thickness.si() <= 0.0 {
                return Err(Error::not_physical(
                    "The layers of a density log",
                    "they do not follow one another; make the record again.",
                ));
            }
            rock += layer.density.si() * thickness.si();
            reached = layer.bottom;
        }
        let stress = Pressure::from_si(GRAVITY * (SEA_WATER * water.si() + rock));
        let below_rotary = record.below_rotary()?;
        if below_rotary.si() <= 0.0 {
            return Err(Error::out_of_range(
                "the depth below the rotary table",
                with_typed_unit(below_rotary),
                "positive",
            ));
        }
        Ok(Overburden {
            stress,
            gradient: stress.gradient_over(below_rotary),
            mean_density: Density::from_si(rock / (log_depth - surface).si()),
            log_depth,
            top_stress: Pressure::from_si(top_stress),
            record,
        })
    }
    fn inputs(&self) -> OverburdenRecord {
        self.record.clone()
    }
    fn outcome(&self) -> OverburdenOutcome {
        OverburdenOutcome {
            stress: self.stress,
            gradient: self.gradient,
            mean_density: self.mean_density,
            log_depth: self.log_depth,
            top_stress: self.top_stress,
        }
    }

    /// The full log summed sample by sample; the mean density times the height; elevations counted
    /// from mean sea level.
    fn check(record: &OverburdenRecord, outcome: &OverburdenOutcome) -> Vec<Check> {
        let nan = Length::m(f64::NAN);
        let elevation = |tie: DatumTie, of: Datum| tie.elevation(of).unwrap_or(nan);
        let point = elevation(record.hole, record.depth.below) - record.depth.tvd;
        let surface = elevation(record.log_tie, record.top.surface());
        let log_datum = elevation(record.log_tie, record.about.datum);
        let sea = match record.top {
            Top::Land { .. } => Pressure::default(),
            Top::Sea { .. } => Density::kg_m3(SEA_WATER).column(-surface),
        };
        let top = sea + record.top.mean_density().column(surface - (log_datum - record.first_sample()));
        // Upward from the bottom, as pressures of columns.
        let layers = record.layers.iter().rev().map(|l| l.density.column(l.bottom - l.top));
        let summed = layers.fold(Pressure::default(), |sum, p| sum + p);
        let rotary = elevation(record.hole, Datum::RotaryTable);
        let size = outcome.stress.in_mpa().abs().max(1.0) * 1e-9;
        let mpa = |p: Pressure| p.in_mpa();
        vec![
            Check::compare(
                "S_v against the stress at the top plus the full log, summed sample by sample",
                &[mpa(outcome.stress)],
                &[mpa(top + record.whole_log)],
                size,
                "MPa",
            ),
            Check::compare(
                "S_v against the layers, weighed one by one from the bottom up",
                &[mpa(outcome.stress)],
                &[mpa(summed + top)],
                size,
                "MPa",
            ),
            Check::compare(
                "S_v against the mean density of the whole column times its height",
                &[mpa(outcome.mean_density.column(surface - point) + sea)],
                &[mpa(top + record.whole_log)],
                size,
                "MPa",
            ),
            Check::compare(
                "stress at the first value of the log",
                &[mpa(outcome.top_stress)],
                &[mpa(top)],
                size,
                "MPa",
            ),
            Check::compare(
                "mean gradient times the depth below the rotary table",
                &[mpa(outcome.gradient * (rotary - point))],
                &[mpa(top + record.whole_log)],
                size,
                "MPa",
            ),
            Check::compare(
                "depth in the log from elevations above mean sea level",
                &[outcome.log_depth.si()],
                &[(log_datum - point).si()],
                MEET,
                "m",
            ),
        ]
    }

    fn explain(&self) -> Explanation {
        explain(self)
    }
}

#[cfg(test)]
mod tests {
    use super::super::density_log::tests::log;
    use super::super::las::tests::GOOD;
    use super::*;
    use crate::card::Data;
    use crate::units::Units;

    fn asked(tvd: f64) -> OverburdenInputs {
        OverburdenInputs {
            depth: Depth::below_rotary_table(tvd.m()),
            hole: DatumTie::rotary_table_at(32.4.m()).unwrap(),
            top: Top::Land { mean_density: 2000.kg_m3() },
        }
    }

    #[test]
    fn the_air_gap_weighs_nothing_and_elevations_are_carried_over() {
        // 103 m below 32.4 m is 102.4 m below 31.8 m; the ground lies 6.8 m below the latter.
        let sv = log(GOOD).unwrap().overburden(asked(103.0)).unwrap();
        assert!((sv.log_depth().in_m() - 102.4).abs() < 1e-9);
        let weight = 2000.0 * (100.0 - 6.8) + 2050.0 + 2150.0 + 0.4 * (2200.0 + 2240.0) / 2.0;
        assert!((sv.stress.in_pa() - 9.806_65 * weight).abs() < 1e-3, "{}", sv.stress);
        assert!((sv.gradient.in_mpa_per_km() - sv.stress.in_mpa() / 0.103).abs() < 1e-9);
    }

    #[test]
    fn sea_water_is_weighed_once() {
        let text = GOOD.replace("EGL.M 25.0", "NOTE.M 25.0").replace("EREF.M 31.8", "NOTE2.M 1");
        let tie = DatumTie::rotary_table_at(20.m()).unwrap().with_mudline_at((-60).m()).unwrap();
        let log = log(&text).unwrap().tied(tie).unwrap();
        let top = Top::Sea { mean_density: 1800.kg_m3() };
        let sv =
            log.overburden(OverburdenInputs { depth: Depth::below_rotary_table(101.m()), hole: tie, top }).unwrap();
        let expected = 9.806_65 * (1025.0 * 60.0 + 1800.0 * 20.0 + 2050.0);
        assert!((sv.stress.in_pa() - expected).abs() < 1e-3);
        let on_land = OverburdenInputs { hole: tie, top: Top::Land { mean_density: 1800.kg_m3() }, ..asked(101.0) };
        assert!(log.overburden(on_land).unwrap_err().to_string().contains("with_ground_at"));
    }

    #[test]
    fn explains_itself_and_notices_every_change() {
        let sv = log(GOOD).unwrap().overburden(asked(103.0)).unwrap();
        let card = sv.card();
        assert!(card.passed(), "{:#?}", card.checks);
        let again = Overburden::compute(Data::read(&card.inputs).unwrap()).unwrap();
        assert_eq!(again.card(), card);
        for (place, value) in card.outcome.numbers() {
            for wrong in [value * 1.00001, value * 0.99999] {
                let changed = OverburdenOutcome::read(&card.outcome.with_number(&place, wrong)).unwrap();
                assert!(Overburden::check(&sv.inputs(), &changed).iter().any(|c| !c.passed), "{place}");
            }
        }
    }

    #[test]
    fn nothing_is_extrapolated_and_no_gap_is_bridged_unasked() {
        let refused = |log: &DensityLog, inputs| log.overburden(inputs).unwrap_err().to_string();
        let whole = log(GOOD).unwrap();
        assert!(refused(&whole, asked(104.0)).contains("nothing is extrapolated"));
        assert!(refused(&whole, asked(50.0)).contains("nothing is extrapolated"));
        assert!(refused(&whole, asked(f64::NAN)).contains("depth"));
        let heavy = OverburdenInputs { top: Top::Land { mean_density: 2.kg_m3() }, ..asked(103.0) };
        assert!(refused(&whole, heavy).contains("bulk density"));
        let gap = log(&GOOD.replace("51 2.1", "51 -999.25")).unwrap();
        let message = refused(&gap, asked(103.0));
        assert!(message.contains("from 100 m to 102 m") && message.contains("bridge_gaps_up_to(2.m())"), "{message}");
        let bridged = gap.bridge_gaps_up_to(2.m()).unwrap().overburden(asked(103.0)).unwrap();
        assert!(bridged.card().explanation.inputs.iter().any(|i| i.shown.contains("2.0 m")));
        assert!((bridged.stress.in_pa() - whole.overburden(asked(103.0)).unwrap().stress.in_pa()).abs() < 1e-3);
        let high = log(&GOOD.replace("EGL.M 25.0", "EGL.M -80")).unwrap();
        assert!(refused(&high, asked(103.0)).contains("lies above the ground"));
    }
}
