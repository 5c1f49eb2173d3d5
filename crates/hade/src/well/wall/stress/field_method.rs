//! The method that the cards of the field round a hole share, and its arithmetic with the numbers
//! put in.

use crate::card::{Check, Formula, Item, Method, Reference, Step};
use crate::units::{Quantity, as_typed, fixed};
use crate::well::wall::second_route::ByVectors;
use crate::well::wall::{Wall, method};

/// Formulas, sources and assumptions of the field, with the shear criterion of the rock.
pub(crate) fn with_strength(wall: &Wall, words: &str) -> Method {
    let mut method = method::with_strength(wall, words);
    // The field has formulas of its own; the first four are the wall's, which it becomes at one radius.
    method.formulas.drain(..method.formulas.len().min(5));
    method.formulas.splice(
        0..0,
        [
            Formula::new("u = (R / r)^2", "u = (R / r)²"),
            Formula::new(
                "sigma_d = (sigma_x - sigma_y) / 2 cos 2 theta + tau_(x y) sin 2 theta",
                "σ_d = (σ_x − σ_y) / 2 · cos 2θ + τ_xy sin 2θ",
            ),
            Formula::new(
                "tau_d = tau_(x y) cos 2 theta - (sigma_x - sigma_y) / 2 sin 2 theta",
                "τ_d = τ_xy cos 2θ − (σ_x − σ_y) / 2 · sin 2θ",
            ),
            Formula::new(
                "sigma_r = (sigma_x + sigma_y) / 2 (1 - u) + sigma_d (1 - 4 u + 3 u^2) + p u",
                "σ_r = (σ_x + σ_y) / 2 · (1 − u) + σ_d (1 − 4u + 3u²) + p u",
            ),
            Formula::new(
                "sigma_theta = (sigma_x + sigma_y) / 2 (1 + u) - sigma_d (1 + 3 u^2) - p u",
                "σ_θ = (σ_x + σ_y) / 2 · (1 + u) − σ_d (1 + 3u²) − p u",
            ),
            Formula::new("sigma_(z r) = sigma_z - 4 nu sigma_d u", "σ_zr = σ_z − 4 ν σ_d u"),
            Formula::new("tau_(r theta) = tau_d (1 + 2 u - 3 u^2)", "τ_rθ = τ_d (1 + 2u − 3u²)"),
            Formula::new(
                "tau_(theta z) = (tau_(y z) cos theta - tau_(x z) sin theta)(1 + u)",
                "τ_θz = (τ_yz cos θ − τ_xz sin θ)(1 + u)",
            ),
            Formula::new(
                "tau_(r z) = (tau_(x z) cos theta + tau_(y z) sin theta)(1 - u)",
                "τ_rz = (τ_xz cos θ + τ_yz sin θ)(1 − u)",
            ),
        ],
    );
    method.symbols.extend([
        ("r".to_owned(), "distance from the hole's axis; R is the hole's radius".to_owned()),
        ("σ_zr".to_owned(), "axial stress at that distance".to_owned()),
        ("σ_d".to_owned(), "and τ_d: what the stresses across the hole differ by, seen along the tool face".to_owned()),
    ]);
    method.references.push(Reference::new(
        "Hiramatsu, Y. and Oka, Y. (1968) Determination of the stress in rock unaffected by boreholes or drifts, from measured strains or deformations, Int. J. Rock Mech. Min. Sci. 5, 337–353 (the whole field; cited from memory)",
    ));
    if wall.known_off_the_wall().is_ok() {
        method.assumptions.push("The pore pressure is the formation's at every distance.".to_owned());
    }
    method
}

/// The distance as an input that is a choice.
pub(super) fn ratio_item(ratio: f64) -> Item {
    Item::typed("r/R", "distance from the hole's axis in hole radii", ratio).chosen()
}

/// A distance that was found, in hole radii.
pub(crate) fn ratio_found(symbol: &str, name: &str, ratio: f64) -> Item {
    Item::new(symbol, name, f64::KIND, vec![ratio], fixed(ratio, 4))
}

/// The field at 50 radii, by the hole's own axes, against the far field as it was stated.
pub(crate) fn far_check(wall: &Wall, route: &ByVectors, theta: f64, pressure: f64) -> Check {
    let unit = (route.size() + pressure.abs()) * 1e-6;
    let m = route.direction(theta + std::f64::consts::FRAC_PI_2);
    let axes = [route.direction(theta), m, route.direction_along()];
    let far = wall.elastic_field().at(theta, 1.0 / 2500.0, pressure).tensor();
    Check::compare(
        "the field at 50 radii against the far-field stress (the hole's share is 1/2500)",
        &far.turned(&crate::frames::vector::transpose(&axes)).scale(1e-6).0,
        &route.far().scale(1e-6).0,
        unit * 6.0 / 2500.0,
        "MPa",
    )
}

/// The field at one place away from the wall, with the numbers put in.
pub(crate) fn worked(wall: &Wall, theta: f64, pressure: f64, ratio: f64) -> Vec<Step> {
    let [x, y, z, xy, yz, xz] = wall.setup.inputs.stress.tensor().0.map(|c| c * 1e-6);
    let rock = wall.rock_round(pressure);
    let u = ratio.powi(-2);
    let at = rock.at(theta, u);
    let four = |v: f64| fixed(v, 4);
    let mpa = |v: f64| fixed(v * 1e-6, 4);
    let six = |v: f64| fixed(v, 6);
    let ((s2, c2), (s, c)) = ((2.0 * theta).sin_cos(), theta.sin_cos());
    let (half, mean) = (0.5 * (x - y), 0.5 * (x + y));
    let (d, w) = (half * c2 + xy * s2, xy * c2 - half * s2);
    let p = pressure * 1e-6;
    let [s1, s2_, s3] = rock.effective(theta, u);
    vec![
        Step::worked(format!(
            "u = 1 / {}² = {}; θ = {}°: cos 2θ = {}, sin 2θ = {}, cos θ = {}, sin θ = {}",
            as_typed(ratio),
            six(u),
            four(theta.to_degrees()),
            six(c2),
            six(s2),
            six(c),
            six(s)
        )),
        Step::worked(format!(
            "σ_d = {} · ({}) + ({}) · ({}) = {}; τ_d = ({}) · ({}) − ({}) · ({}) = {} MPa",
            four(half),
            six(c2),
            four(xy),
            six(s2),
            four(d),
            four(xy),
            six(c2),
            four(half),
            six(s2),
            four(w)
        )),
        Step::worked(format!(
            "σ_r = {} · (1 − u) + ({}) · {} + {} · u = {} MPa",
            four(mean),
            four(d),
            six(1.0 - 4.0 * u + 3.0 * u * u),
            four(p),
            mpa(at.radial)
        )),
        Step::worked(format!(
            "σ_θ = {} · (1 + u) − ({}) · {} − {} · u = {} MPa",
            four(mean),
            four(d),
            six(1.0 + 3.0 * u * u),
            four(p),
            mpa(at.hoop)
        )),
        Step::worked(format!(
            "σ_zr = {} − 4 · {} · ({}) · u = {} MPa",
            four(z),
            as_typed(wall.setup.inputs.rock.poisson),
            four(d),
            mpa(at.axial)
        )),
        Step::worked(format!(
            "τ_rθ = ({}) · {} = {}; τ_θz = (({}) · ({}) − ({}) · ({})) (1 + u) = {}; τ_rz = (({}) · ({}) + ({}) · ({})) (1 − u) = {} MPa",
            four(w),
            six(1.0 + 2.0 * u - 3.0 * u * u),
            mpa(at.radial_hoop),
            four(yz),
            six(c),
            four(xz),
            six(s),
            mpa(at.hoop_axial),
            four(xz),
            six(c),
            four(yz),
            six(s),
            mpa(at.radial_axial)
        )),
        Step::worked(format!(
            "principal stresses of the six, less P_p = {}: σ'_1 = {}, σ'_2 = {}, σ'_3 = {} MPa",
            mpa(wall.shear.pore),
            mpa(s1),
            mpa(s2_),
            mpa(s3)
        )),
    ]
}
