//! The card of a map.

use super::check::wall_of;
use super::direction_map::{DirectionMap, DirectionMapInputs, MapOutcome, MappedDirection};
use super::extremes::{Extremes, extremes};
use super::figure::{figure, words};
use super::map_of::MapOf;
use crate::card::{Card, Check, Column, Explain, Explanation, Item, Method, Step, Table};
use crate::error::Result;
use crate::frames::{Attitude, Azimuth};
use crate::units::{Angle, Pressure, Quantity, Warming, as_typed, fixed, with_typed_unit};
use crate::well::wall::limits::{Limits, capitalised};
use crate::well::wall::method;
use crate::well::wall::setup::{WallSetup, items_beside_rock};

/// A table of the map prints these inclinations and every 30° of azimuth.
const PRINTED: [f64; 7] = [0.0, 15.0, 30.0, 45.0, 60.0, 75.0, 90.0];
/// More directions that are equally good are only counted.
const MOST_NAMED: usize = 4;

impl Explain for DirectionMap {
    const KIND: &'static str = "direction-map";
    /// The limits rest on iterations.
    const REPLAY_TOLERANCE: f64 = 1e-8;
    type Inputs = DirectionMapInputs;
    type Outcome = MapOutcome;

    fn compute(inputs: DirectionMapInputs) -> Result<Self> {
        DirectionMap::build(inputs)
    }
    fn inputs(&self) -> DirectionMapInputs {
        self.inputs.clone()
    }
    fn outcome(&self) -> MapOutcome {
        self.worked_out()
    }
    fn check(inputs: &DirectionMapInputs, outcome: &MapOutcome) -> Vec<Check> {
        super::check::check(inputs, outcome)
    }

    fn explain(&self) -> Explanation {
        let outcome = self.worked_out();
        let found = extremes(&self.grid, &self.values, self.shows());
        let map = &self.inputs.map;
        let mut inputs =
            vec![map.stress.item("S", "stress in north, east, down"), Item::typed("P_p", "pore pressure", map.pore)];
        inputs.extend(map.rock.items());
        inputs.extend(items_beside_rock(None, self.inputs.thermal, None));
        inputs.push(Item::typed("Δ", "step of the map in inclination and azimuth", map.step).chosen());
        inputs.push(Item::choice("", "what is mapped", self.shows().words()));
        inputs.extend(self.inputs.path.iter().flat_map(|path| path.items.clone()));
        Explanation {
            title: format!("{} by hole direction{}", capitalised(self.shows().words()), map.stress.under_name()),
            headline: self.headline(&outcome, &found),
            inputs,
            results: self.results(&outcome),
            method: self.method(),
            steps: self.steps(&outcome),
            figures: vec![figure(self, &outcome, &found)],
            notes: self.notes(&outcome, &found),
            topics: ["wall", "limits", "elastic", "stress"]
                .into_iter()
                .chain(self.inputs.thermal.map(|_| "thermal"))
                .map(str::to_owned)
                .collect(),
        }
    }

    fn warnings(&self) -> Vec<String> {
        let none = self.worked_out().on_path.iter().any(Option::is_none);
        let said = none.then(|| format!("At a direction of the planned path there is {}.", self.shows().none_words()));
        said.into_iter().chain(self.inputs.map.rock.doubts()).collect()
    }

    fn upstream(&self) -> Vec<Card> {
        let stress = self.inputs.map.stress;
        let mut cards = stress.upstream();
        cards.push(stress.card());
        cards
    }
}

/// "34.22 MPa".
fn shown(value: Option<Pressure>) -> String {
    value.map_or_else(|| "none".to_owned(), |p| p.to_string())
}

impl DirectionMap {
    fn named(&self, numbers: &[usize]) -> String {
        let name = |number: &usize| {
            let (i, a) = self.grid.direction(*number);
            words(&MappedDirection { inclination: Angle::from_si(i), azimuth: Angle::from_si(a), limit: None })
        };
        match numbers {
            [] => "no direction".to_owned(),
            [first, rest @ ..] if rest.len() >= MOST_NAMED => {
                format!("{}, and {} other directions alike", name(first), rest.len())
            }
            several => several.iter().map(name).collect::<Vec<_>>().join("; or "),
        }
    }

    fn headline(&self, outcome: &MapOutcome, found: &Extremes) -> String {
        let of = self.shows();
        let (Some(best), Some(worst)) = (outcome.best, outcome.worst) else {
            return format!("no direction has a {}: {}", of.words(), of.none_words());
        };
        let mut said = if found.best == found.worst {
            format!("{} in every direction that has one", shown(best.limit))
        } else {
            format!(
                "{} {} ({}), {} {} ({})",
                of.best_word(),
                shown(best.limit),
                self.named(&found.best),
                of.worst_word(),
                shown(worst.limit),
                self.named(&found.worst)
            )
        };
        if let Some((path, planned)) = self.inputs.path.as_ref().zip(outcome.on_path.last()) {
            said.push_str(&format!("; {} {}", path.last_words(), shown(*planned)));
        }
        if outcome.share_without > 0.0 {
            said.push_str(&format!(
                "; {} % of directions have {}",
                fixed(100.0 * outcome.share_without, 1),
                of.none_words()
            ));
        }
        said
    }

    fn results(&self, outcome: &MapOutcome) -> Vec<Item> {
        let symbol = self.shows().symbol();
        let mut items = Vec::new();
        for (word, direction) in [("best", outcome.best), ("worst", outcome.worst)] {
            let Some(direction) = direction else { continue };
            let words = words(&direction);
            let name = format!("{word} of the mapped directions ({words})");
            items.extend(direction.limit.map(|p| Item::computed(&format!("{symbol},{word}"), name, p)));
        }
        if let Some((path, Some(planned))) = self.inputs.path.as_ref().zip(outcome.on_path.last()) {
            let (of, name) = match path.directions.len() {
                1 => ("planned", "in the planned direction"),
                _ => ("end", "in the direction of the end of the path"),
            };
            items.push(Item::computed(&format!("{symbol},{of}"), name, *planned));
        }
        let share = fixed(100.0 * outcome.share_without, 2);
        items.push(Item::new(
            "f_0",
            format!("share of the lower hemisphere with {}", self.shows().none_words()),
            "share",
            vec![outcome.share_without],
            format!("{share} %"),
        ));
        items
    }

    fn method(&self) -> Method {
        let map = &self.inputs.map;
        let words = format!(
            "The stress is carried into the axes of a hole in each direction (inclinations 0–90°, azimuths all round, every {}°), and the {} of its impermeable wall is found exactly round the hole.",
            as_typed(map.step.in_deg()),
            self.shows().words()
        );
        // The method of one wall is that of all.
        let direction = self.shown_direction(&self.worked_out());
        let mut method = match wall_of(&self.inputs, direction) {
            Ok(wall) => method::with_strength(&wall, &words),
            Err(_) => Method { words, ..Method::default() },
        };
        if matches!(self.shows(), MapOf::Initiation | MapOf::Width) {
            method.formulas.push(crate::card::Formula::new(
                "(sigma_theta - P_p + T_0)(sigma_(z w) - P_p + T_0) = tau_(theta z)^2",
                "parting: (σ_θ − P_p + T₀)(σ_zw − P_p + T₀) = τ_θz²",
            ));
        }
        if self.shows() == MapOf::Width {
            method.formulas.push(crate::card::Formula::new(
                "Delta p = min(p_(u s), p_i, S_3) - max(p_(l s), P_p)",
                "Δp = min(p_us, p_i, S_3) − max(p_ls, P_p), without margins or allowed width",
            ));
        }
        method.formulas.push(crate::card::Formula::new(
            "A = (cos(i - Delta/2) - cos(i + Delta/2)) Delta / (2 pi)",
            "a direction stands for the share (cos(i − Δ/2) − cos(i + Δ/2)) Δ/2π of the hemisphere",
        ));
        method
    }

    /// The direction worked by hand: the planned one, or the best.
    fn shown_direction(&self, outcome: &MapOutcome) -> (f64, f64) {
        let planned = self.inputs.path.iter().flat_map(|path| path.directions.last().copied()).next();
        let best = outcome.best.map(|d| (d.inclination.si(), d.azimuth.si()));
        planned.or(best).unwrap_or_default()
    }

    fn steps(&self, outcome: &MapOutcome) -> Vec<Step> {
        let (i, a) = self.shown_direction(outcome);
        let hole = Attitude { inclination: Angle::from_si(i), azimuth: Azimuth::from_true_north(Angle::from_si(a)) };
        let which = self.inputs.path.as_ref().map_or("best of the mapped directions", |path| path.last_words());
        let mut steps = vec![
            Step::words(format!("Every direction is worked as this one, the {which} ({}):", hole.words())),
            Step::matrix("S", &self.inputs.map.stress.rows_in_mpa(), 4, "MPa", "north, east, down"),
        ];
        if let Ok(chain) = hole.chain() {
            steps.push(Step::matrix("Q", &chain.matrix(), 6, "", "rows: top of hole, right, along the hole"));
            steps.push(Step::worked("S' = Q S Qᵀ".to_owned()));
        }
        if let Ok(wall) = wall_of(&self.inputs, (i, a)) {
            let limits = wall.limits();
            let worked = match self.shows() {
                MapOf::LowerShear => vec![limits.lower_shear],
                MapOf::UpperShear => vec![limits.upper_shear],
                MapOf::Initiation => vec![limits.initiation],
                MapOf::Width => vec![limits.lower_shear, limits.upper_shear, limits.initiation],
            };
            steps.extend(limits.worked_all(&worked));
            steps.extend(self.worked_width(&limits));
        }
        steps.push(Step::Table { table: self.table() });
        steps.extend(self.path_table(outcome).map(|table| Step::Table { table }));
        steps
    }

    fn worked_width(&self, limits: &Limits) -> Option<Step> {
        let mpa = |p: Option<Pressure>| p.map(|p| fixed(p.in_mpa(), 4));
        let (us, i) = (mpa(limits.upper_shear.pressure())?, mpa(limits.initiation.pressure())?);
        let (s3, ls) = (mpa(limits.least_stress.pressure())?, mpa(limits.lower_shear.pressure())?);
        let pore = mpa(limits.pore_pressure.pressure())?;
        (self.shows() == MapOf::Width).then(|| {
            Step::worked(format!("Δp = the smallest of {us}, {i} and {s3}, less the larger of {ls} and {pore} MPa"))
        })
    }

    /// Some of the map as numbers.
    fn table(&self) -> Table {
        let rows = (0..12).map(|k| f64::from(k) * 30.0).map(|azimuth| {
            let value = |inclination: &f64| {
                let p = self.value((inclination.to_radians(), azimuth.to_radians()));
                p.map_or_else(|| "none".to_owned(), |p| fixed(p * 1e-6, 2))
            };
            std::iter::once(format!("{azimuth:03.0}°")).chain(PRINTED.iter().map(value)).collect()
        });
        let mut columns = vec![Column::text("azimuth")];
        columns.extend(PRINTED.iter().map(|i| Column::number(&format!("i = {i:.0}°"), "MPa")));
        Table {
            caption: format!("{} by azimuth (from true north) and inclination i", capitalised(self.shows().words())),
            columns,
            rows: rows.collect(),
        }
    }

    fn path_table(&self, outcome: &MapOutcome) -> Option<Table> {
        let path = self.inputs.path.as_ref()?;
        let rows = path.directions.iter().zip(&outcome.on_path).map(|((i, a), value)| {
            let [i, a] = [i, a].map(|angle| fixed(angle.to_degrees(), 1));
            vec![i, a, value.map_or_else(|| "none".to_owned(), |p| fixed(p.in_mpa(), 2))]
        });
        Some(Table {
            caption:
                "Along the path, downward; directions that hardly differ are left out, the last is that of its end"
                    .to_owned(),
            columns: vec![
                Column::number("inclination", "°"),
                Column::number("azimuth", "°"),
                Column::number(self.shows().words(), "MPa"),
            ],
            rows: rows.collect(),
        })
    }

    fn notes(&self, outcome: &MapOutcome, found: &Extremes) -> Vec<String> {
        let mut notes = Vec::new();
        let of = self.shows();
        if outcome.share_without > 0.0 {
            notes.push(format!(
                "WARNING: {} % of the lower hemisphere, by area, has {}.",
                fixed(100.0 * outcome.share_without, 2),
                of.none_words()
            ));
        }
        for (word, numbers) in [("best", &found.best), ("worst", &found.worst)] {
            if numbers.len() > 1 {
                notes.push(format!("{} directions are equally the {word}: {}.", numbers.len(), self.named(numbers)));
            }
        }
        notes.push(format!(
            "Best and worst are of the mapped directions, {}° apart; between them the limit may be a little better or worse. The directions of a path are exact.",
            as_typed(self.inputs.map.step.in_deg())
        ));
        notes.push(match of {
            MapOf::Width => "The width is between bare limits: no margin is kept, no width of a failing arc is allowed; a range to work in is a card of its own.",
            _ => "The limit is bare: it carries no margin and allows nothing to fail.",
        }.to_owned());
        if self.inputs.path.iter().flat_map(|path| &path.directions).any(|(i, _)| *i > std::f64::consts::FRAC_PI_2) {
            notes.push(
                "Where the path rises it is shown at the lower end of its line, which has the same wall.".to_owned(),
            );
        }
        let temperature = match self.inputs.thermal {
            None => "has the temperature of the rock".to_owned(),
            Some(thermal) => format!(
                "is {} by {}",
                if thermal.warming.si() < 0.0 { "cooled" } else { "warmed" },
                with_typed_unit(Warming::from_si(thermal.warming.si().abs()))
            ),
        };
        notes.push(format!("The wall is impermeable and {temperature}; the stress, pore pressure and rock are the same for every direction. The least stress S_3 does not depend on it."));
        if self.inputs.path.as_ref().is_some_and(|path| path.directions.len() > 1) {
            notes.push("Along the path too the stress, pore pressure and rock are those of the one place that is mapped; for the limits at every depth of the path there is the log.".to_owned());
        }
        if let Ok(wall) = wall_of(&self.inputs, (0.0, 0.0)) {
            notes.extend(WallSetup::notes(&wall.setup));
            notes.extend(self.inputs.map.rock.strength.warning().map(str::to_owned));
        }
        notes
    }
}
