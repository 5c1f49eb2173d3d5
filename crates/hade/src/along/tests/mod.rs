//! The ground and the log together: what the tests share.
#![cfg(test)]

mod events;
mod files;
mod ground;
mod log;
mod record;
mod section_ensemble;
mod temperatures;

use crate::along::*;
use crate::card::Explain;
use crate::field::PressureProfile;
use crate::frames::{Azimuth, Datum, DatumTie, Depth, Plane};
use crate::rock::{HoekBrown, Rock, Strength};
use crate::spread::Draws;
use crate::stress::{Horizontals, Stress};
use crate::units::{Angle, Length, Pressure, Units};
use crate::well::{MudPlan, RangeChoices, Station, Survey, Thermal, Vary, Wall, WallInputs, WeakPlane};

fn shale() -> Rock {
    Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength: Strength::mohr_coulomb(8.mpa(), 30.deg()) }
}
fn sand() -> Rock {
    Rock { poisson: 0.2, tensile_strength: 1.mpa(), strength: Strength::mohr_coulomb(12.mpa(), 38.deg()) }
}
fn azimuth(degrees: f64) -> Azimuth {
    Azimuth::from_true_north(degrees.deg())
}
fn station(md: f64, i: f64, a: f64) -> Station {
    Station { md: md.m(), inclination: i.deg(), azimuth: azimuth(a) }
}
/// Vertical to 1000 m, then building to 50° at 2500 m, and on to 4000 m.
fn survey(towards: f64) -> Survey {
    let stations = [(0.0, 0.0), (1000.0, 0.0), (2500.0, 50.0), (4000.0, 50.0)].map(|(md, i)| station(md, i, towards));
    Survey::from_stations(&stations).unwrap()
}
fn gradient(symbol: &str, per_km: f64) -> PressureProfile {
    let begin = Depth::below_rotary_table(0.m());
    PressureProfile::from_gradient(per_km.mpa_per_km(), begin, 0.mpa()).unwrap().of(symbol, symbol)
}
fn constant(symbol: &str, mpa: f64) -> PressureProfile {
    let begin = Depth::below_rotary_table(0.m());
    PressureProfile::from_gradient(0.mpa_per_km(), begin, mpa.mpa()).unwrap().of(symbol, symbol)
}
fn at_rt(z: f64) -> Depth {
    Depth::below_rotary_table(z.m())
}
fn choices(from: f64, to: f64, step: f64, width: f64) -> LogChoices {
    LogChoices {
        from: from.m(),
        to: to.m(),
        step: step.m(),
        allowed_width: width.deg(),
        margin_bottom: 1.mpa(),
        margin_top: 1.5.mpa(),
    }
}
/// The same everywhere: S_v 66.9, S_Hmax 58.2, S_hmin 47.1, P_p 31.2.
fn uniform(sh_max_towards: f64) -> Ground {
    Ground::new(GroundInputs {
        sv: constant("S_v", 66.9),
        pore: constant("P_p", 31.2),
        horizontals: Some(HorizontalProfiles { sh_min: constant("S_hmin", 47.1), sh_max: constant("S_Hmax", 58.2) }),
        sh_max_azimuth: azimuth(sh_max_towards),
        layers: vec![Layer::from("rock", at_rt(0.0), shale()).unwrap()],
    })
    .unwrap()
}
fn by_ratios(layers: Vec<Layer>) -> Ground {
    Ground::new(GroundInputs {
        sv: gradient("S_v", 22.6),
        pore: gradient("P_p", 10.4),
        horizontals: None,
        sh_max_azimuth: azimuth(35.0),
        layers,
    })
    .unwrap()
}
fn close(a: Pressure, b: Pressure) -> bool {
    (a - b).abs() < 1.pa()
}
