//! Planes ranked by how little pore pressure they lack to slip or open.

use serde::{Deserialize, Serialize};

use super::names::no_such;
use super::set::{Fault, FaultSet, FaultSource, corrected_at, require};
use super::slip::{Extremes, FaultSlip, FaultSlipInputs, FaultState, SlipOutcome, slip_of};
use super::slip_check::slip_checks;
use super::strength::FaultStrength;
use crate::card::{Card, Check, Explain, Explanation};
use crate::error::{Error, Result};
use crate::frames::{Azimuth, Geographic, Plane, Site};
use crate::stress::Stress;
use crate::units::{Pressure, Quantity};

/// A card holds no more planes than this.
pub(super) const MOST_ON_A_CARD: usize = 500;
/// Of a longer file, a card holds this many: the nearest to slip.
pub(super) const WORST_ON_A_CARD: usize = 200;

/// The planes of a set under a stress, the most critical first. From [`FaultSet::ranked`].
#[derive(Clone, Debug, PartialEq)]
pub struct RankedFaults {
    inputs: RankedInputs,
    /// In the order of the planes.
    outcome: Vec<SlipOutcome>,
    /// The planes' places, from the least margin up.
    order: Vec<usize>,
}

/// The inputs. Of a file with many planes only the most critical are kept, and what was left out is
/// told in numbers.
#[derive(Clone, Debug, PartialEq, Serialize, Deserialize)]
pub struct RankedInputs {
    pub(super) stress: Stress<Geographic>,
    pub(super) strength: FaultStrength,
    pub(super) pore: Pressure,
    pub(super) source: FaultSource,
    pub(super) faults: Vec<Fault>,
    pub(super) left_out: Option<LeftOut>,
    /// The site that corrected the strikes of a file, kept once for all of them.
    #[serde(default, skip_serializing_if = "Option::is_none")]
    pub(super) site: Option<Site>,
}

/// What a card says of the planes it does not hold.
#[derive(Clone, Copy, Debug, PartialEq, Serialize, Deserialize)]
pub(super) struct LeftOut {
    pub planes: usize,
    pub slipping: usize,
    pub open: usize,
    /// The least margin among them; no plane of the card has more.
    pub least_margin: Pressure,
}

/// One plane of a ranking.
#[derive(Clone, Copy, Debug, PartialEq)]
#[non_exhaustive]
pub struct RankedFault {
    /// The plane with its name.
    pub fault: Fault,
    /// What the stress does on it.
    pub slip: FaultSlip,
}

impl FaultSet {
    /// The planes under a stress at a pore pressure, ranked by the pore pressure that each lacks to
    /// slip or open, the most critical first. The strength counts for every plane that does not
    /// bring its own friction or cohesion.
    ///
    /// A card holds at most 500 planes. Of a longer file it holds the 200 most critical, tells the
    /// rest in numbers and names the file by its hash.
    ///
    /// # Errors
    /// When the friction is not greater than zero, the cohesion is negative, the pore pressure is
    /// not finite, or more than 500 planes were typed in the notebook.
    pub fn ranked(&self, stress: &Stress<Geographic>, strength: FaultStrength, pore: Pressure) -> Result<RankedFaults> {
        let data = self.data();
        let site = corrected_at(&data.source, &data.faults);
        let plain = |fault: &Fault| if site.is_some() { fault.without_site() } else { *fault };
        let inputs = RankedInputs {
            stress: *stress,
            strength,
            pore,
            source: data.source.clone(),
            faults: Vec::new(),
            left_out: None,
            site,
        };
        if data.faults.len() <= MOST_ON_A_CARD {
            let faults = data.faults.iter().map(plain).collect();
            return RankedFaults::compute(RankedInputs { faults, ..inputs });
        }
        if data.source == FaultSource::Typed {
            return Err(Error::not_physical(
                format!("A ranking of {} typed planes", data.faults.len()),
                format!(
                    "a record holds at most {MOST_ON_A_CARD}; write the planes into a CSV file and read it with FaultSet::read_csv, so that the file stands for them."
                ),
            ));
        }
        let all = slips(&inputs, &data.faults)?;
        let order = order(&all, pore);
        let (kept, rest) = order.split_at(WORST_ON_A_CARD);
        // The kept planes stay in the order of the file.
        let mut kept = kept.to_vec();
        kept.sort_unstable();
        let faults = kept.iter().filter_map(|i| data.faults.get(*i).map(plain)).collect();
        let rest: Vec<&SlipOutcome> = rest.iter().filter_map(|i| all.get(*i)).collect();
        let count = |state: FaultState| rest.iter().filter(|o| o.state() == state).count();
        let left_out = LeftOut {
            planes: rest.len(),
            slipping: count(FaultState::Slips),
            open: count(FaultState::Open),
            least_margin: rest.first().map_or(Pressure::default(), |o| o.critical_pore - pore),
        };
        RankedFaults::compute(RankedInputs { faults, left_out: Some(left_out), ..inputs })
    }
}

/// What the stress does on each plane.
fn slips(inputs: &RankedInputs, faults: &[Fault]) -> Result<Vec<SlipOutcome>> {
    let extremes = Extremes::of(&inputs.stress);
    faults
        .iter()
        .map(|f| slip_of(&inputs.stress, extremes, f.plane, f.strength(inputs.strength), inputs.pore))
        .collect()
}

/// The places from the least margin up; planes of one margin stay in their order.
fn order(outcomes: &[SlipOutcome], pore: Pressure) -> Vec<usize> {
    let margin = |i: &usize| outcomes.get(*i).map_or(f64::INFINITY, |o| (o.critical_pore - pore).si());
    let mut places: Vec<usize> = (0..outcomes.len()).collect();
    places.sort_by(|a, b| margin(a).total_cmp(&margin(b)));
    places
}

impl RankedInputs {
    /// The site that corrected the strikes, with one of them.
    pub(super) fn corrected(&self) -> Option<(Site, Azimuth)> {
        Some((self.site?, self.faults.first()?.plane.strike))
    }
}

impl RankedFaults {
    /// The planes, the most critical first; of a long file the 200 most critical.
    pub fn rows(&self) -> Vec<RankedFault> {
        self.order.iter().filter_map(|i| self.row(*i)).collect()
    }

    fn row(&self, place: usize) -> Option<RankedFault> {
        let (fault, outcome) = (*self.inputs.faults.get(place)?, *self.outcome.get(place)?);
        let RankedInputs { stress, strength, pore, .. } = self.inputs;
        // By its true strike: how the file's north was corrected is the ranking's affair.
        let plane = Plane { strike: Azimuth::from_true_north(fault.plane.strike.true_north().ok()?), ..fault.plane };
        let inputs = FaultSlipInputs { stress, plane, strength: fault.strength(strength), pore };
        Some(RankedFault { fault, slip: FaultSlip::from_parts(inputs, outcome) })
    }

    /// The most critical plane.
    pub fn worst(&self) -> Option<RankedFault> {
        self.order.first().and_then(|i| self.row(*i))
    }

    /// The plane of a name.
    ///
    /// # Errors
    /// When no plane of the ranking has the name.
    pub fn fault(&self, name: &str) -> Result<RankedFault> {
        let faults = &self.inputs.faults;
        let place = faults.iter().position(|f| f.name.text() == name);
        let found = place.and_then(|i| self.row(i));
        found.ok_or_else(|| no_such(name, faults.iter().map(|f| f.name.text()), "of the ranking"))
    }

    /// How many planes the set has.
    pub fn planes(&self) -> usize {
        self.outcome.len() + self.inputs.left_out.map_or(0, |l| l.planes)
    }

    /// How many planes slip at the pore pressure.
    pub fn slipping(&self) -> usize {
        self.count(FaultState::Slips) + self.inputs.left_out.map_or(0, |l| l.slipping)
    }

    /// How many planes are open at the pore pressure.
    pub fn open(&self) -> usize {
        self.count(FaultState::Open) + self.inputs.left_out.map_or(0, |l| l.open)
    }

    fn count(&self, state: FaultState) -> usize {
        self.outcome.iter().filter(|o| o.state() == state).count()
    }
}

impl Explain for RankedFaults {
    const KIND: &'static str = "ranked-faults";
    type Inputs = RankedInputs;
    /// One for each plane, in the order of the inputs: a ranking by nearly equal numbers may differ
    /// from machine to machine, the numbers may not.
    type Outcome = Vec<SlipOutcome>;

    fn compute(inputs: RankedInputs) -> Result<Self> {
        if inputs.faults.len() > MOST_ON_A_CARD {
            return Err(Error::out_of_range(
                "the number of planes on one card",
                inputs.faults.len().to_string(),
                format!("at most {MOST_ON_A_CARD}"),
            ));
        }
        inputs.strength.checked()?;
        require(&inputs.faults)?;
        let outcome = slips(&inputs, &inputs.faults)?;
        let order = order(&outcome, inputs.pore);
        Ok(RankedFaults { inputs, outcome, order })
    }
    fn inputs(&self) -> RankedInputs {
        self.inputs.clone()
    }
    fn outcome(&self) -> Vec<SlipOutcome> {
        self.outcome.clone()
    }

    /// Every number of every plane by the principal stresses and direction cosines. Where planes
    /// were left out, none of the card's has more margin than they.
    fn check(inputs: &RankedInputs, outcome: &Vec<SlipOutcome>) -> Vec<Check> {
        if inputs.faults.len() != outcome.len() {
            return Vec::new();
        }
        let planes: Vec<_> =
            inputs.faults.iter().zip(outcome).map(|(f, o)| (f.plane, f.strength(inputs.strength), *o)).collect();
        let mut checks = slip_checks(&inputs.stress, inputs.pore, &planes);
        if let Some(left_out) = inputs.left_out {
            let most = outcome.iter().map(|o| (o.critical_pore - inputs.pore).si()).fold(f64::NEG_INFINITY, f64::max);
            checks.push(Check::holds(
                "no plane of the card has more margin than the least of those left out",
                (most - left_out.least_margin.si()) * 1e-6,
                inputs.stress.tensor().largest().max(1.0) * 1e-11 * 1e-6,
                "MPa",
            ));
        }
        checks
    }

    fn explain(&self) -> Explanation {
        super::ranked_card::explain(self, &self.inputs)
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.inputs.stress.upstream();
        cards.extend(self.inputs.stress.stated());
        let corrected = self.inputs.corrected();
        cards.extend(corrected.and_then(|(site, strike)| site.correction_card(strike.north())));
        cards
    }
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::frames::Name;
    use crate::sheet::{Sheet, Source};
    use crate::stress::Horizontals;
    use crate::units::Units;

    fn stress() -> Stress {
        Stress::from_horizontals(Horizontals {
            sv: 66.9.mpa(),
            sh_max: 58.2.mpa(),
            sh_min: 47.1.mpa(),
            sh_max_azimuth: Azimuth::from_true_north(35.deg()),
        })
        .unwrap()
    }

    fn faults(count: usize) -> Vec<Fault> {
        let of = |i: usize| Fault {
            name: Name::new(&format!("F{i}")),
            plane: Plane {
                strike: Azimuth::from_true_north(((i * 37 % 360) as f64).deg()),
                dip: ((i * 53 % 91) as f64).deg(),
            },
            friction: None,
            cohesion: None,
        };
        (0..count).map(of).collect()
    }

    fn weak() -> FaultStrength {
        FaultStrength { friction: 0.2, cohesion: 0.mpa() }
    }

    #[test]
    fn the_most_critical_plane_comes_first_and_its_own_strength_counts() {
        let mut planes = faults(40);
        planes[7].friction = Some(0.05);
        planes[8].cohesion = Some(30.mpa());
        let set = FaultSet::build(FaultSource::Typed, planes).unwrap();
        let ranked = set.ranked(&stress(), weak(), 31.mpa()).unwrap();
        let margins: Vec<f64> = ranked.rows().iter().map(|r| r.slip.margin().in_mpa()).collect();
        assert!(margins.windows(2).all(|m| m[0] <= m[1]));
        assert_eq!(ranked.slipping(), margins.iter().filter(|m| **m <= 0.0).count());
        assert!(ranked.slipping() > 3 && ranked.open() == 0);
        assert_eq!(ranked.fault("F7").unwrap().slip.strength().friction, 0.05);
        assert!(ranked.fault("F8").unwrap().slip.opens_first());
        for row in ranked.rows() {
            let alone = stress().slip_on(row.fault.plane, row.slip.strength(), 31.mpa()).unwrap();
            assert_eq!(alone.outcome(), row.slip.outcome());
        }
        assert!(ranked.fault("nobody").is_err());
    }

    /// A long file: the card holds the worst, the counts are those of the whole.
    #[test]
    fn a_long_file_is_told_by_its_worst_planes_and_by_counts() {
        let source = FaultSource::File { path: "f.csv".to_owned(), sha256: "00".to_owned() };
        let many = FaultSet::build(source, faults(3_000)).unwrap();
        let ranked = many.ranked(&stress(), weak(), 31.mpa()).unwrap();
        assert_eq!((ranked.planes(), ranked.rows().len()), (3_000, WORST_ON_A_CARD));
        let truth: Vec<FaultSlip> =
            faults(3_000).iter().map(|f| stress().slip_on(f.plane, weak(), 31.mpa()).unwrap()).collect();
        assert_eq!(ranked.slipping(), truth.iter().filter(|s| s.state() == FaultState::Slips).count());
        let mut margins: Vec<f64> = truth.iter().map(|s| s.margin().si()).collect();
        margins.sort_by(f64::total_cmp);
        let kept: Vec<f64> = ranked.rows().iter().map(|r| r.slip.margin().si()).collect();
        assert_eq!(kept, margins[..WORST_ON_A_CARD]);
        let card = ranked.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert!(card.inputs.text().len() < 120_000, "{}", card.inputs.text().len());
        let typed = FaultSet::build(FaultSource::Typed, faults(501)).unwrap();
        assert!(typed.ranked(&stress(), weak(), 31.mpa()).unwrap_err().to_string().contains("FaultSet::read_csv"));
        // A plane of the card that lies beyond those left out turns the check red.
        let mut wrong = ranked.inputs();
        wrong.left_out.as_mut().unwrap().least_margin = Pressure::mpa(-40.0);
        assert!(RankedFaults::check(&wrong, &ranked.outcome()).iter().any(|c| !c.passed));
    }

    /// The worst plane of a file has a card of its own, and every input of it is found: strike, dip
    /// and its own friction in the ranking, the ranking's planes in the file.
    #[test]
    fn the_worst_plane_of_a_file_is_traced_through_the_ranking() {
        let path = std::env::temp_dir().join(format!("hade-faults-{}.csv", std::process::id()));
        let path = path.to_str().unwrap();
        let text = "# north: grid, convergence: -1.32\n# angle_unit: deg\n# cohesion_unit: MPa\nname,dip_direction,dip,friction,cohesion\nA,128,62,,\nB,300,58,0.45,0.2\n";
        std::fs::write(path, text).unwrap();
        let mut sheet = Sheet::new("test");
        let source = || Source::measured("a test");
        let s = Stress::from_horizontals(Horizontals {
            sv: sheet.given("S_v", "vertical stress", 66.9.mpa(), source()),
            sh_max: sheet.given("S_Hmax", "larger horizontal stress", 58.2.mpa(), source()),
            sh_min: sheet.given("S_hmin", "smaller horizontal stress", 47.1.mpa(), source()),
            sh_max_azimuth: sheet.given("A", "azimuth", Azimuth::from_true_north(35.deg()), source()),
        })
        .unwrap();
        let pore = sheet.given("P_p", "pore pressure", 31.mpa(), source());
        let friction = sheet.given("μ", "friction of faults", 0.6, source());
        let cohesion = sheet.given("C", "cohesion of faults", 0.mpa(), source());
        let set = FaultSet::read_csv(sheet.data(path, "faults").unwrap()).unwrap();
        let ranked = set.ranked(&s, FaultStrength { friction, cohesion }, pore).unwrap();
        sheet.add(&ranked);
        assert_eq!(ranked.worst().unwrap().fault.name.text(), "B");
        for row in ranked.rows() {
            sheet.add(&row.slip);
        }
        std::fs::remove_file(path).unwrap();
        let record = sheet.record();
        assert_eq!(record.unknown_inputs(), vec![]);
        assert!(record.cards().iter().all(|(card, _)| card.passed() && card.kind != "azimuth-to-true-north"));
    }
}
