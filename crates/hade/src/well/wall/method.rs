//! The method that the cards of a wall share, and its arithmetic with the numbers put in.

use super::direction;
use super::elastic::AtWall;
use super::wall::Wall;
use crate::card::{Formula, Method, Reference, Step};
use crate::frames::vector::{V3, add, apply, dot, norm, scale};
use crate::rock::Law;
use crate::units::{Quantity, fixed};

/// Formulas, sources and assumptions of the wall stresses.
pub(super) fn wall_stresses(wall: &Wall) -> Method {
    let mut method = Method {
        words: "Stress at the wall of a round hole in elastic rock, from the far-field stress in the hole's axes and the pressure in the hole.".to_owned(),
        formulas: vec![
            Formula::new("sigma_r = p", "σ_r = p"),
            Formula::new(
                "sigma_theta = sigma_x + sigma_y - 2 (sigma_x - sigma_y) cos 2 theta - 4 tau_(x y) sin 2 theta - p",
                "σ_θ = σ_x + σ_y − 2 (σ_x − σ_y) cos 2θ − 4 τ_xy sin 2θ − p",
            ),
            Formula::new(
                "sigma_(z w) = sigma_z - nu [2 (sigma_x - sigma_y) cos 2 theta + 4 tau_(x y) sin 2 theta]",
                "σ_zw = σ_z − ν [2 (σ_x − σ_y) cos 2θ + 4 τ_xy sin 2θ]",
            ),
            Formula::new(
                "tau_(theta z) = 2 (-tau_(x z) sin theta + tau_(y z) cos theta)",
                "τ_θz = 2 (−τ_xz sin θ + τ_yz cos θ)",
            ),
            Formula::new(
                "sigma_(1,2) = (sigma_theta + sigma_(z w)) / 2 plus.minus sqrt(((sigma_theta - sigma_(z w)) / 2)^2 + tau_(theta z)^2)",
                "principal stresses in the wall: (σ_θ + σ_zw) / 2 ± √(((σ_θ − σ_zw) / 2)² + τ_θz²)",
            ),
            Formula::new("sigma' = sigma - P_p", "σ' = σ − P_p"),
        ],
        symbols: vec![
            ("σ_x".to_owned(), "and σ_y, σ_z, τ_xy, τ_yz, τ_xz: components of S' in the hole's axes".to_owned()),
            ("θ".to_owned(), "tool face, clockwise from the top of the hole looking down it".to_owned()),
            ("σ_zw".to_owned(), "axial stress at the wall".to_owned()),
            ("p".to_owned(), "pressure in the hole".to_owned()),
        ],
        references: [
            "Kirsch, G. (1898) Die Theorie der Elastizität und die Bedürfnisse der Festigkeitslehre, Z. Ver. dt. Ing. 42, 797–807 (cited from memory)",
            "Hiramatsu, Y. and Oka, Y. (1962) Stress around a shaft or level excavated in ground with a three-dimensional stress state, Mem. Fac. Eng. Kyoto Univ. 24, 56–76 (cited from memory)",
            "Fairhurst, C. (1968) Methods of determining in situ rock stresses at great depths, TR 1-68, US Army Corps of Engineers, Omaha (cited from memory)",
            "Bradley, W.B. (1979) Failure of inclined boreholes, J. Energy Resour. Technol. 101, 232–239 (cited from memory)",
            "Terzaghi, K. (1943) Theoretical Soil Mechanics, Wiley (effective stress; cited from memory)",
        ]
        .map(Reference::new)
        .to_vec(),
        assumptions: vec![
            "Rock round the hole is isotropic and linear elastic until it fails.".to_owned(),
            "Plane strain along the hole: it is long, and round.".to_owned(),
        ],
    };
    let setup = &wall.setup;
    match setup.seepage {
        None => method
            .assumptions
            .push("The wall is impermeable: the pore pressure behind it stays that of the formation.".to_owned()),
        Some(seepage) => {
            method.words.push_str(" Fluid passes the wall and stands in the pores behind it.");
            method.formulas.extend([
                Formula::new(
                    "P_w = P_p + (1 - w_s)(p - P_p)",
                    "P_w = P_p + (1 − w_s)(p − P_p), the pore pressure behind the wall",
                ),
                Formula::new(
                    "eta_s = alpha (1 - 2 nu) / (2 (1 - nu)), quad Delta sigma_s = 2 eta_s (P_w - P_p)",
                    "η_s = α (1 − 2ν) / (2 (1 − ν)), Δσ_s = 2 η_s (P_w − P_p)",
                ),
                Formula::new(
                    "sigma_theta -> sigma_theta + Delta sigma_s, quad sigma_(z w) -> sigma_(z w) + Delta sigma_s",
                    "Δσ_s is added to σ_θ and to σ_zw",
                ),
                Formula::new("sigma' = sigma - P_w", "σ' = σ − P_w"),
            ]);
            method.symbols.extend([
                (
                    "P_w".to_owned(),
                    "pore pressure behind the wall; it takes the place of P_p in σ' at the wall".to_owned(),
                ),
                ("w_s".to_owned(), "sealing of the wall: 0 permeable, 1 impermeable".to_owned()),
                ("η_s".to_owned(), "poroelastic coefficient; α is Biot's".to_owned()),
            ]);
            method.references.push(Reference::new(
                "Haimson, B. and Fairhurst, C. (1967) Initiation and extension of hydraulic fractures in rocks, SPE J. 7, 310–318 (seepage at the wall; cited from memory)",
            ));
            method.assumptions.push(if seepage.sealing > 0.0 {
                "The wall holds back the stated share of the pressure above the pore pressure; the rest stands behind it, steady.".to_owned()
            } else {
                "The wall is permeable: the pressure in the hole stands in the pores behind it, steady.".to_owned()
            });
        }
    }
    match setup.thermal {
        None => method.assumptions.push("The rock has the temperature of the mud.".to_owned()),
        Some(_) => {
            method.formulas.push(Formula::new(
                "Delta sigma_T = (E alpha_T Delta T) / (1 - nu), quad sigma_theta -> sigma_theta + Delta sigma_T, quad sigma_(z w) -> sigma_(z w) + Delta sigma_T",
                "Δσ_T = E α_T ΔT / (1 − ν), added to σ_θ and to σ_zw",
            ));
            method.references.push(Reference::new(
                "Stephens, G. and Voight, B. (1982) Hydraulic fracturing theory for conditions of thermal stress, Int. J. Rock Mech. Min. Sci. 19, 279–284 (cited from memory)",
            ));
            method.assumptions.push("The wall has the stated temperature difference, steady.".to_owned());
        }
    }
    method
}

/// What a reader must know of any result of this wall.
pub(super) fn notes(wall: &Wall) -> Vec<String> {
    let mut notes = wall.setup.notes();
    notes.extend(wall.strength().warning().map(str::to_owned));
    notes.push(direction::reference(wall.attitude));
    notes
}

/// The name of the margin at the worst place.
pub(super) fn margin_name(wall: &Wall) -> String {
    let slip =
        if wall.setup.weak_plane.is_some() { ", or c_w + σ'_n tan φ_w − τ on the plane of weakness," } else { "" };
    format!("margin {}{slip} at the worst place", wall.strength().margin_words())
}

/// The σ1' that the rock bears at a place (Pa), the other two as they are there.
pub(super) fn bears(wall: &Wall, theta: f64, pressure: f64) -> f64 {
    borne_by(wall.shear.law, wall.shear.principal(theta, pressure), wall.shear.scale())
}

/// The σ1' that a rock bears beside σ2' and σ3' (Pa), between σ2' and four times `scale` above it.
pub(super) fn borne_by(law: Law, [s1, s2, s3]: [f64; 3], scale: f64) -> f64 {
    // The excess grows with σ1' from σ2' on: halving finds where it is zero.
    let (mut low, mut high) = (s2, s2 + 4.0 * scale);
    if law.excess([high, s2, s3]) <= 0.0 || law.excess([low, s2, s3]) >= 0.0 {
        return if law.excess([low, s2, s3]) >= 0.0 { s2.min(s1) } else { high };
    }
    for _ in 0..60 {
        let middle = 0.5 * (low + high);
        if law.excess([middle, s2, s3]) > 0.0 { high = middle } else { low = middle }
    }
    low
}

/// The same with the shear criterion of the wall's rock.
pub(super) fn with_strength(wall: &Wall, words: &str) -> Method {
    let mut method = wall_stresses(wall);
    words.clone_into(&mut method.words);
    method.formulas.extend(wall.strength().formulas());
    method.references.extend(wall.strength().references());
    method.symbols.extend(wall.strength().symbols());
    method.assumptions.extend(wall.strength().assumptions());
    if wall.setup.weak_plane.is_some() {
        method.formulas.push(Formula::new(
            "tau = c_w + sigma'_upright(n) tan phi_w",
            "on the plane of weakness: τ = c_w + σ'_n tan φ_w, with the whole traction of the wall on it",
        ));
        method.references.push(Reference::new(
            "Jaeger, J.C. (1960) Shear failure of anisotropic rocks, Geol. Mag. 97, 65–72 (cited from memory)",
        ));
        method.assumptions.push(
            "The plane of weakness is through every place of the wall, and the rock beside it is isotropic.".to_owned(),
        );
    }
    method
}

/// The wall stresses at one place and pressure, with the numbers put in.
pub(super) fn worked(wall: &Wall, theta: f64, pressure: f64) -> Vec<Step> {
    let at = wall.shear.at(theta, pressure);
    let [x, y, z, xy, yz, xz] = wall.setup.inputs.stress.tensor().0.map(|c| fixed(c * 1e-6, 4));
    let mpa = |c: f64| fixed(c * 1e-6, 4);
    let (s2, c2) = (2.0 * theta).sin_cos();
    let (s, c) = theta.sin_cos();
    let [s2, c2, s, c] = [s2, c2, s, c].map(|v| fixed(v, 6));
    let nu = crate::units::as_typed(wall.setup.inputs.rock.poisson);
    let p = mpa(pressure);
    let setup = &wall.setup;
    let (mut plus, mut added) = (String::new(), Vec::new());
    if setup.seepage.is_some() {
        let seepage = wall.shear.passes * wall.shear.eta2 * (pressure - wall.shear.pore);
        added.push(Step::worked(format!(
            "2 η_s = {}; P_w = {} MPa; Δσ_s = 2 η_s (P_w − P_p) = {} MPa",
            fixed(wall.shear.eta2, 6),
            mpa(wall.shear.pore_behind(pressure)),
            mpa(seepage)
        )));
        plus.push_str(&format!(" + ({})", mpa(seepage)));
    }
    if let Some(thermal) = setup.thermal {
        added.push(Step::worked(format!(
            "Δσ_T = {} · {} · ({}) / (1 − {nu}) = {} MPa",
            crate::units::as_typed(thermal.youngs_modulus.in_mpa()),
            crate::units::as_typed(thermal.expansion.in_per_kelvin()),
            crate::units::as_typed(thermal.warming.in_kelvin()),
            mpa(setup.thermal_stress())
        )));
        plus.push_str(&format!(" + ({})", mpa(setup.thermal_stress())));
    }
    let mut steps = vec![Step::worked(format!(
        "θ = {}°: cos 2θ = {c2}, sin 2θ = {s2}, cos θ = {c}, sin θ = {s}",
        fixed(theta.to_degrees(), 4)
    ))];
    steps.extend(added);
    steps.extend([
        Step::worked(format!("σ_r = p = {p} MPa")),
        Step::worked(format!(
            "σ_θ = {x} + {y} − 2 ({x} − {y}) ({c2}) − 4 ({xy}) ({s2}) − {p}{plus} = {} MPa",
            mpa(at.hoop)
        )),
        Step::worked(format!(
            "σ_zw = {z} − {nu} [2 ({x} − {y}) ({c2}) + 4 ({xy}) ({s2})]{plus} = {} MPa",
            mpa(at.axial)
        )),
        Step::worked(format!("τ_θz = 2 (−({xz}) ({s}) + ({yz}) ({c})) = {} MPa", mpa(at.shear))),
        Step::worked(principal_line(at, wall.shear.pore_behind(pressure), setup.seepage.is_some())),
    ]);
    steps
}

fn principal_line(at: AtWall, pore: f64, seeps: bool) -> String {
    let mpa = |c: f64| fixed(c * 1e-6, 4);
    let (e1, e2, _) = at.in_the_wall();
    format!(
        "in the wall: {} and {} MPa; less {} = {}: {}, {} and across it {} MPa",
        mpa(e1),
        mpa(e2),
        if seeps { "P_w" } else { "P_p" },
        mpa(pore),
        mpa(e1 - pore),
        mpa(e2 - pore),
        mpa(at.radial - pore)
    )
}

/// The shear criterion at one place, with the numbers put in; slip on the plane of weakness where
/// there is one.
pub(super) fn worked_strength(wall: &Wall, theta: f64, pressure: f64) -> Vec<Step> {
    let mut steps = wall.strength().worked(wall.shear.principal(theta, pressure));
    steps.extend(worked_plane(wall, theta, pressure));
    steps
}

/// The traction on the plane of weakness at one place; Pa.
pub(super) struct OnPlane {
    /// Its normal in wall axes.
    normal: V3,
    traction: V3,
    sigma_n: f64,
    effective: f64,
    shear: f64,
    /// c_w + σn' tan φ_w − τ.
    pub margin: f64,
}

/// By vectors in wall axes; `None` where the wall has no plane of weakness.
pub(super) fn on_weak_plane(wall: &Wall, theta: f64, pressure: f64) -> Option<OnPlane> {
    let weak = wall.setup.weak_plane?;
    let [x, y, z] = apply(&wall.attitude.matrix().ok()?, weak.plane.axes().ok()?.normal);
    let (s, c) = theta.sin_cos();
    let [r, h, z] = [c * x + s * y, c * y - s * x, z];
    let at = wall.shear.at(theta, pressure);
    let traction = [at.radial * r, at.hoop * h + at.shear * z, at.shear * h + at.axial * z];
    let normal = [r, h, z];
    let sigma_n = dot(traction, normal);
    let shear = norm(add(traction, scale(normal, -sigma_n)));
    let effective = sigma_n - wall.shear.pore_behind(pressure);
    let margin = weak.cohesion.si() + effective * weak.friction_angle.si().tan() - shear;
    Some(OnPlane { normal, traction, sigma_n, effective, shear, margin })
}

/// Slip on the plane of weakness, with the numbers put in.
pub(super) fn worked_plane(wall: &Wall, theta: f64, pressure: f64) -> Vec<Step> {
    let (Some(weak), Some(on)) = (wall.setup.weak_plane, on_weak_plane(wall, theta, pressure)) else {
        return Vec::new();
    };
    let mpa = |v: f64| fixed(v * 1e-6, 4);
    let [r, h, z] = on.normal.map(|v| fixed(v, 6));
    let [tr, th, tz] = on.traction.map(mpa);
    let tan = weak.friction_angle.si().tan();
    vec![
        Step::worked(format!(
            "plane of weakness, normal in wall axes (r, θ, z) = ({r}, {h}, {z}): traction ({tr}, {th}, {tz}) MPa; σ_n = {}, σ'_n = {}, τ = {} MPa",
            mpa(on.sigma_n),
            mpa(on.effective),
            mpa(on.shear)
        )),
        Step::worked(format!(
            "c_w + σ'_n tan φ_w − τ = {} + ({}) · {} − {} = {} MPa",
            crate::units::as_typed(weak.cohesion.in_mpa()),
            mpa(on.effective),
            fixed(tan, 6),
            mpa(on.shear),
            mpa(on.margin)
        )),
    ]
}
