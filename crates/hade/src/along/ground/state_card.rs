//! The card of stress and pore pressure at a depth of the ground, and its checks by another route.

use super::doubts::doubts_of_path;
use super::in_hole::GroundInHole;
use super::layer::Layer;
use super::state::{GroundState, GroundStateInputs, GroundStateOutcome};
use crate::along::Ground;
use crate::card::{Card, Check, Explain, Explanation, Item};
use crate::error::Result;
use crate::stress::doubts_of_overburden;
use crate::units::{Pressure, Quantity, Warming, fixed};
use crate::well::{Survey, stated_items};

/// Depths that must meet may differ by this, metres.
const MEET: f64 = 1e-6;

impl Explain for GroundState {
    const KIND: &'static str = "ground-at-depth";
    type Inputs = GroundStateInputs;
    type Outcome = GroundStateOutcome;

    fn compute(inputs: GroundStateInputs) -> Result<Self> {
        let (survey, ground) = inputs.read()?;
        ground.at(&survey, inputs.md)
    }
    fn inputs(&self) -> GroundStateInputs {
        self.record.clone()
    }
    fn outcome(&self) -> GroundStateOutcome {
        GroundStateOutcome {
            layer: self.there.layer_name(),
            tvd: self.tvd,
            sv: self.sv,
            pore: self.pore,
            sh_min: self.sh_min,
            sh_max: self.sh_max,
            sh_max_azimuth: self.sh_max_azimuth.true_north().unwrap_or_default(),
            drawdown: self.drawdown,
            warming: self.warming,
        }
    }
    fn check(inputs: &GroundStateInputs, outcome: &GroundStateOutcome) -> Vec<Check> {
        checks(inputs, outcome).unwrap_or_default()
    }

    fn explain(&self) -> Explanation {
        let mut inputs = vec![Item::typed("MD", "measured depth asked for", self.md), self.survey.item()];
        inputs.extend(stated_items(&self.survey));
        inputs.extend(self.ground.items());
        let mpa = |pressure: Pressure| fixed(pressure.in_mpa(), 2);
        let mut results = vec![
            Item::computed("z", "true vertical depth below the rotary table", self.tvd),
            Item::computed("S_v", "vertical stress", self.sv),
            Item::computed("S_Hmax", "larger horizontal stress", self.sh_max),
            Item::computed("S_hmin", "smaller horizontal stress", self.sh_min),
            Item::computed("P_p", "pore pressure", self.pore),
        ];
        results.push(self.sh_max_azimuth.item("A", "azimuth of S_Hmax"));
        results.extend(self.warming.map(|warming| Item::computed("ΔT", "warming of the wall by the mud", warming)));
        results.extend(self.there.rock_items());
        let mut method = self.ground.method();
        method.words = "The survey gives the place of the hole, the tops or the stated intervals its layer; vertical stress and pore pressure come from their profiles, the horizontal stresses from the layer's ratios of effective stress or from their profiles.".to_owned();
        Explanation {
            title: format!("Stress and pore pressure of the ground along {}", self.place_words()),
            headline: format!(
                "{}: S_v {}, S_Hmax {}, S_hmin {}, P_p {} MPa at TVD {} m",
                self.layer(),
                mpa(self.sv),
                mpa(self.sh_max),
                mpa(self.sh_min),
                mpa(self.pore),
                fixed(self.tvd.si(), 1)
            ),
            inputs,
            results,
            method,
            steps: GroundInHole::new(&self.ground, &self.survey)
                .map(|in_hole| in_hole.worked(&self.there))
                .unwrap_or_default(),
            figures: Vec::new(),
            notes: self.notes(),
            topics: self.topics(),
        }
    }

    fn warnings(&self) -> Vec<String> {
        let mut said = doubts_of_overburden(&[(self.tvd, self.sv)]);
        said.extend(doubts_of_path(&self.survey, [self.md, self.md]));
        said.extend(self.ground.doubts_of(|name| name == self.layer()));
        said
    }

    fn upstream(&self) -> Vec<Card> {
        let mut cards = self.survey.upstream();
        cards.extend(self.ground.upstream());
        cards
    }
}

impl GroundState {
    fn notes(&self) -> Vec<String> {
        let Layer { depletion, .. } = self.there.layer;
        let mut notes = Vec::new();
        if let Some(depletion) = depletion {
            notes.push(format!(
                "{}: {}. The stress path stated for it holds for the state it was measured in.",
                self.layer(),
                depletion.words()
            ));
        }
        if let Some(warming) = self.warming {
            notes.push(format!(
                "These stresses are those of the ground away from the hole. What the mud does to the wall (ΔT {warming}) is in state.wall()?, not in a wall or a map that is made of the stress alone."
            ));
        }
        notes
    }

    fn topics(&self) -> Vec<String> {
        let depleted = self.drawdown.map(|_| "depletion");
        let warmed = self.warming.map(|_| "thermal");
        ["survey", "stress"].into_iter().chain(depleted).chain(warmed).map(str::to_owned).collect()
    }
}

impl GroundStateInputs {
    fn read(&self) -> Result<(Survey, Ground)> {
        Ok((Survey::from_record(self.survey.clone())?, Ground::from_record(self.ground.clone())?))
    }
}

/// The depth by quadrature, the stresses by shares, the layer from a millimetre off, the azimuth as stated.
fn checks(inputs: &GroundStateInputs, outcome: &GroundStateOutcome) -> Result<Vec<Check>> {
    let (survey, ground) = inputs.read()?;
    let in_hole = GroundInHole::new(&ground, &survey)?;
    let place = survey.place(inputs.md)?;
    let index = in_hole.layer_at(&place)?;
    let other = in_hole.by_another_route(&place, index).unwrap_or([f64::NAN; 4]).map(|p| p * 1e-6);
    let size = other.iter().fold(1.0_f64, |m, v| m.max(v.abs()));
    let got = [outcome.sv, outcome.pore, outcome.sh_min, outcome.sh_max].map(Pressure::in_mpa);
    let same = in_hole.layers_beside(&survey, inputs.md).into_iter().any(|layer| layer.name == outcome.layer);
    let stated = in_hole.layer(index).and_then(|layer| layer.sh_max_azimuth).unwrap_or(ground.azimuth());
    let mut checks = vec![
        Check::compare(
            "TVD by Simpson's rule over the turning direction",
            &[outcome.tvd.si()],
            &survey.depths_by_quadrature(&[inputs.md.si()]),
            MEET,
            "m",
        ),
        Check::compare(
            "S_v, P_p, S_hmin, S_Hmax by the distances to the points of the profiles, S = K S_v + (1 − K) P_p − κ ΔP_p",
            &got,
            &other,
            1e-9 * size,
            "MPa",
        ),
        Check::compare(
            "azimuth of S_Hmax as stated for the layer, or else for the ground",
            &[outcome.sh_max_azimuth.in_deg()],
            &[stated.true_north()?.in_deg()],
            1e-9,
            "°",
        ),
        Check::holds(
            "whether the layer is that of a millimetre of hole above or below (0 when it is)",
            f64::from(!same),
            0.0,
            "",
        ),
    ];
    let virgin = in_hole.virgin_pore(place.at[2]).in_mpa();
    let depleted = in_hole.layer(index).is_some_and(|layer| layer.depletion.is_some());
    if depleted || outcome.drawdown.is_some() {
        checks.push(Check::compare(
            "drawdown as the difference of the profile's pore pressure and that after it",
            &[outcome.drawdown.map_or(f64::NAN, Pressure::in_mpa)],
            &[virgin - other[1]],
            1e-9 * size,
            "MPa",
        ));
    }
    let warming = in_hole.warming_by_another_route(&place, index);
    if warming.is_some() || outcome.warming.is_some() {
        let kelvin = |warming: Option<Warming>| warming.map_or(f64::NAN, Warming::in_kelvin);
        checks.push(Check::compare(
            "ΔT by the distances to the points of the temperatures, a gradient in °F and feet",
            &[kelvin(outcome.warming)],
            &[kelvin(warming)],
            1e-9,
            "K",
        ));
    }
    Ok(checks)
}
