//! What the card of tensile cracks says.

use super::tensile_cracks::{CrackPlace, TensileCracks};
use crate::card::{Column, Explanation, Formula, Item, Method, Reference, Step, Table};
use crate::units::{Angle, Quantity, fixed, with_typed_unit};
use crate::well::wall::{Wall, direction, method, pressure_item};

/// Formulas and sources of cracks.
pub(crate) fn crack_method(wall: &Wall, words: &str) -> Method {
    let mut method = method::wall_stresses(wall);
    words.clone_into(&mut method.words);
    method.formulas.extend([
        Formula::new(
            "sigma'_2 <= -T_0",
            "parted where the smaller principal stress in the wall, σ'_2, is −T_0 or less",
        ),
        Formula::new(
            "delta = 1 / 2 upright(\"atan2\")(-2 tau_(theta z), sigma_(z w) - sigma_theta)",
            "δ = ½ atan2(−2 τ_θz, σ_zw − σ_θ)",
        ),
    ]);
    method.symbols.push(("δ".to_owned(), "tilt of a crack's trace from the hole's axis: positive when the trace is turned clockwise from the axis as seen from inside the hole looking at the wall, down-hole down; going down along it the tool face then falls".to_owned()));
    method.references.extend([
        Reference::new(
            "Brudy, M. and Zoback, M.D. (1999) Drilling-induced tensile wall-fractures: implications for determination of in-situ stress orientation and magnitude, Int. J. Rock Mech. Min. Sci. 36, 191–215 (cracks tilted to the hole's axis; cited from memory)",
        ),
        Reference::new(
            "Peška, P. and Zoback, M.D. (1995) Compressive and tensile failure of inclined well bores and determination of in situ stress and rock strength, J. Geophys. Res. 100, 12791–12811 (the angle of the least stress in the wall; cited from memory)",
        ),
    ]);
    method.assumptions.push(
        "A crack opens across the least principal stress in the wall; how it runs on behind the wall, or joins with others, is not followed.".to_owned(),
    );
    method
}

impl CrackPlace {
    /// "turned 12.3° clockwise from the hole's axis", "along the hole".
    pub(crate) fn tilt_words(&self) -> String {
        let Some(tilt) = self.tilt else { return "in no preferred direction".to_owned() };
        let degrees = tilt.in_deg();
        if degrees.abs() < 0.05 {
            return "along the hole".to_owned();
        }
        if degrees.abs() > 89.95 {
            return "across the hole".to_owned();
        }
        let sense = if degrees > 0.0 { "clockwise" } else { "anticlockwise" };
        format!("turned {} {sense} from the hole's axis", tilt.abs())
    }
}

/// The tool face, bearing and tilt of a place as results.
pub(crate) fn place_items(wall: &Wall, of: &str, symbol: &str, place: &CrackPlace) -> Vec<Item> {
    let mut items = direction::items(wall.attitude, of, symbol, place.toolface);
    if let Some(tilt) = place.tilt {
        items.push(Item::computed(
            &format!("δ_{symbol}"),
            format!("tilt of {of}, clockwise positive seen from inside"),
            tilt,
        ));
    }
    items
}

/// The tilt at a place with the numbers put in.
pub(crate) fn worked_tilt(wall: &Wall, place: &CrackPlace, pressure: f64) -> Step {
    let at = wall.shear.at(place.toolface.si(), pressure);
    let mpa = |v: f64| fixed(v * 1e-6, 4);
    Step::worked(format!(
        "δ = ½ atan2(−2 · ({}), {} − ({})) = {}; at +180° it is {}",
        mpa(at.shear),
        mpa(at.axial),
        mpa(at.hoop),
        place.tilt.map_or_else(|| "undefined".to_owned(), |t| format!("{}°", fixed(t.in_deg(), 3))),
        place.tilt.map_or_else(|| "undefined".to_owned(), |t| format!("{}°", fixed(-t.in_deg(), 3))),
    ))
}

impl TensileCracks {
    /// "an arc 34.1° wide is parted …".
    pub(crate) fn words(&self) -> String {
        let attitude = self.wall.attitude;
        let tensile = self.wall.setup.inputs.rock.tensile_strength;
        match self.arcs().first() {
            None => format!(
                "no tensile crack; the least effective stress in the wall is {}, and −T₀ is {}",
                self.outcome.least,
                with_typed_unit(tensile.scale(-1.0))
            ),
            Some(arc) => {
                let extent = if arc.whole_wall {
                    "the whole wall is parted in tension".to_owned()
                } else {
                    format!("an arc {} wide is parted in tension", arc.width)
                };
                match arc.first {
                    None => format!("{extent}, all round alike"),
                    Some(first) => format!(
                        "{extent}, first at tool face {}, the crack {} (the other way at +180°)",
                        direction::words(attitude, first.toolface),
                        first.tilt_words()
                    ),
                }
            }
        }
    }

    pub(super) fn explanation(&self) -> Explanation {
        let (pressure, outcome) = (self.inputs.pressure, &self.outcome);
        let mut inputs = self.wall.items();
        inputs.push(pressure_item(pressure));
        let mut results = vec![Item::computed(
            "σ'_2min",
            "least effective principal stress in the wall's tangent plane",
            outcome.least,
        )];
        if let Some(first) = &outcome.first {
            results.extend(place_items(&self.wall, "a crack where it is least", "t", first));
        }
        for (arc, n) in outcome.list().zip(1..) {
            results.push(Item::computed(
                &format!("θ_c{n}"),
                format!("tool face of the middle of parted arc {n}"),
                arc.centre,
            ));
            results.push(Item::computed(&format!("w_t{n}"), format!("width of parted arc {n}"), arc.width));
        }
        if let Some(initiation) = outcome.initiation {
            results.push(Item::computed("p_init", "pressure at which the first crack opens", initiation));
        }
        if let Some(first) = &outcome.initiation_at {
            results.extend(place_items(&self.wall, "the first crack", "init", first));
        }
        let mut steps = Vec::new();
        if let Some(table) = self.table() {
            steps.push(Step::Table { table });
        }
        match outcome.first {
            Some(first) => {
                steps.push(Step::words("Where the least stress in the wall is least:"));
                steps.extend(method::worked(&self.wall, first.toolface.si(), pressure.si()));
                steps.push(worked_tilt(&self.wall, &first, pressure.si()));
            }
            None => {
                steps.push(Step::words("All places of the wall are alike:"));
                steps.extend(method::worked(&self.wall, 0.0, pressure.si()));
            }
        }
        if let (Some(initiation), Some(first)) = (outcome.initiation, outcome.initiation_at) {
            steps.push(Step::words(format!("At initiation, {initiation}:")));
            steps.extend(method::worked(&self.wall, first.toolface.si(), initiation.si()));
            steps.push(worked_tilt(&self.wall, &first, initiation.si()));
        }
        Explanation {
            title: format!("Tensile cracks of the wall of {} at {}", self.wall.place(), with_typed_unit(pressure)),
            headline: self.words(),
            inputs,
            results,
            method: crack_method(
                &self.wall,
                "Where the smaller effective principal stress in the wall's tangent plane is beyond −T₀, and the tilt of the crack that opens across it. The edges of the arcs are roots.",
            ),
            steps,
            notes: self.notes(),
            topics: self.wall.topics(&["wall", "tensile", "elastic"]),
            ..Explanation::default()
        }
    }

    fn notes(&self) -> Vec<String> {
        let mut notes = method::notes(&self.wall);
        notes.push("Each arc stands for two: the same is parted on the far side of the hole, 180° of tool face away, where the cracks are tilted the other way.".to_owned());
        if let Some(initiation) = self.outcome.initiation {
            notes.push(format!("The first crack opens at {initiation}."));
        } else {
            notes.push("At every pressure the wall parts somewhere, or spalls before it ceases to.".to_owned());
        }
        let pressure = self.inputs.pressure.si();
        let across = pressure - self.wall.shear.pore_behind(pressure);
        if across < -self.wall.setup.inputs.rock.tensile_strength.si() {
            notes.push("The effective stress across the wall is itself beyond −T₀ at this pressure: the wall spalls all round; that is not a crack of this card.".to_owned());
        }
        notes
    }

    fn table(&self) -> Option<Table> {
        let arcs = self.arcs();
        let degrees = |tilt: Option<Angle>, sign: f64| tilt.map_or("–".to_owned(), |t| fixed(sign * t.in_deg(), 2));
        (!arcs.is_empty()).then(|| Table {
            caption: "Arcs that are parted in tension, widest first; each repeats at +180° of tool face".to_owned(),
            columns: vec![
                Column::text("arc"),
                Column::number("from", "°"),
                Column::number("to", "°"),
                Column::number("width", "°"),
                Column::number("first crack, tool face", "°"),
                Column::number("bearing", "°"),
                Column::number("tilt", "°"),
                Column::number("tilt at +180°", "°"),
            ],
            rows: arcs
                .iter()
                .zip(1..)
                .map(|(arc, n)| {
                    let (centre, half) = (arc.centre.in_deg(), 0.5 * arc.width.in_deg());
                    let first = arc.first;
                    vec![
                        if arc.whole_wall { "whole wall".to_owned() } else { n.to_string() },
                        fixed(centre - half, 2),
                        fixed(centre + half, 2),
                        fixed(2.0 * half, 2),
                        first.map_or("–".to_owned(), |f| fixed(f.toolface.in_deg(), 2)),
                        first.map_or("–".to_owned(), |f| direction::bearing_cell(self.wall.attitude, f.toolface)),
                        degrees(first.and_then(|f| f.tilt), 1.0),
                        degrees(first.and_then(|f| f.tilt), -1.0),
                    ]
                })
                .collect(),
        })
    }
}
