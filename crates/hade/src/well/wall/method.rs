//! The method that the cards of a wall share, and its arithmetic with the numbers put in.

use super::kirsch::AtWall;
use super::wall::Wall;
use crate::card::{Formula, Method, Reference, Step};
use crate::units::{Quantity, fixed};

/// Formulas, sources and assumptions of the wall stresses.
pub(super) fn wall_stresses() -> Method {
    Method {
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
            "The wall is impermeable: the pore pressure behind it stays that of the formation.".to_owned(),
            "The rock has the temperature of the mud.".to_owned(),
        ],
    }
}

/// The same with the shear criterion of the wall's rock.
pub(super) fn with_strength(wall: &Wall, words: &str) -> Method {
    let mut method = wall_stresses();
    words.clone_into(&mut method.words);
    method.formulas.extend(wall.inputs.rock.strength.formulas());
    method.references.extend(wall.inputs.rock.strength.references());
    method
}

/// The wall stresses at one place and pressure, with the numbers put in.
pub(super) fn worked(wall: &Wall, theta: f64, pressure: f64) -> Vec<Step> {
    let at = wall.shear.kirsch.at(theta, pressure);
    let [x, y, z, xy, yz, xz] = wall.inputs.stress.tensor().0.map(|c| fixed(c * 1e-6, 4));
    let mpa = |c: f64| fixed(c * 1e-6, 4);
    let (s2, c2) = (2.0 * theta).sin_cos();
    let (s, c) = theta.sin_cos();
    let [s2, c2, s, c] = [s2, c2, s, c].map(|v| fixed(v, 6));
    let nu = crate::units::as_typed(wall.inputs.rock.poisson);
    let p = mpa(pressure);
    vec![
        Step::worked(format!(
            "θ = {}°: cos 2θ = {c2}, sin 2θ = {s2}, cos θ = {c}, sin θ = {s}",
            fixed(theta.to_degrees(), 4)
        )),
        Step::worked(format!("σ_r = p = {p} MPa")),
        Step::worked(format!("σ_θ = {x} + {y} − 2 ({x} − {y}) ({c2}) − 4 ({xy}) ({s2}) − {p} = {} MPa", mpa(at.hoop))),
        Step::worked(format!("σ_zw = {z} − {nu} [2 ({x} − {y}) ({c2}) + 4 ({xy}) ({s2})] = {} MPa", mpa(at.axial))),
        Step::worked(format!("τ_θz = 2 (−({xz}) ({s}) + ({yz}) ({c})) = {} MPa", mpa(at.shear))),
        Step::worked(principal_line(at, wall.shear.pore)),
    ]
}

fn principal_line(at: AtWall, pore: f64) -> String {
    let mpa = |c: f64| fixed(c * 1e-6, 4);
    let (e1, e2, _) = at.in_the_wall();
    format!(
        "in the wall: {} and {} MPa; less P_p = {}: {}, {} and across it {} MPa",
        mpa(e1),
        mpa(e2),
        mpa(pore),
        mpa(e1 - pore),
        mpa(e2 - pore),
        mpa(at.radial - pore)
    )
}

/// The shear criterion at one place, with the numbers put in.
pub(super) fn worked_strength(wall: &Wall, [s1, _, s3]: [f64; 3]) -> Step {
    let line = wall.shear.line;
    let mpa = |c: f64| fixed(c * 1e-6, 4);
    Step::worked(format!(
        "UCS + q σ'_3 − σ'_1 = {} + {} · ({}) − ({}) = {} MPa",
        mpa(line.ucs),
        fixed(line.q, 5),
        mpa(s3),
        mpa(s1),
        mpa(line.margin([s1, 0.0, s3]))
    ))
}

/// The effective principal stresses at one place, larger first.
pub(super) fn effective(wall: &Wall, theta: f64, pressure: f64) -> [f64; 3] {
    let at = wall.shear.kirsch.at(theta, pressure);
    let (e1, e2, _) = at.in_the_wall();
    let pore = wall.inputs.pore.si();
    let mut all = [e1 - pore, e2 - pore, at.radial - pore];
    all.sort_unstable_by(|a, b| b.total_cmp(a));
    all
}
