//! Invariants, horizontal stresses, faulting regime and tractions against an independent numpy
//! implementation, to 1e-9 relative.

use super::stress::{stress_of, true_azimuth};
use hade::card::Explain;
use hade::prelude::*;
use hade_tests::{agree, assert_all_close, cases, number, numbers};

const RELATIVE: f64 = 1e-9;

fn regime(name: &str) -> Regime {
    match name {
        "normal" => Regime::NormalFaulting,
        "strike-slip" => Regime::StrikeSlip,
        "reverse" => Regime::ReverseFaulting,
        "isotropic" => Regime::Isotropic,
        other => panic!("{other} is no regime"),
    }
}

#[test]
fn invariants_of_a_tensor() {
    for case in cases("invariants") {
        let i = stress_of(&numbers(&case.inputs, "stress_ned")).invariants();
        let out = &case.outputs;
        let mean = number(out, "mean");
        // A number that is zero, or small beside the stress, is held against the stress itself.
        let close = |key: &str, got: f64, power: i32| {
            let want = number(out, key);
            let noise = 1e-13 * mean.abs().powi(power);
            assert!(agree(got, want, RELATIVE * want.abs() + noise), "{} {key}: got {got}, want {want}", case.id);
        };
        close("I1", i.i1().in_mpa(), 1);
        close("I2", i.i2_in_mpa2(), 2);
        close("I3", i.i3_in_mpa3(), 3);
        close("J2", i.j2_in_mpa2(), 2);
        close("J3", i.j3_in_mpa3(), 3);
        close("mean", i.mean().in_mpa(), 1);
        close("sigma_oct", i.octahedral_normal().in_mpa(), 1);
        close("tau_oct", i.octahedral_shear().in_mpa(), 1);
        close("von_mises", i.von_mises().in_mpa(), 1);
        close("max_shear", i.max_shear().in_mpa(), 1);
        match out["lode_deg"].as_f64() {
            Some(want) => {
                let got = i.lode().unwrap_or_else(|| panic!("{}: no Lode angle", case.id)).in_deg();
                assert!(agree(got, want, RELATIVE * 60.0), "{} Lode: got {got}, want {want}", case.id);
            }
            None => assert_eq!(i.lode(), None, "{}", case.id),
        }
        // The deviator is the tensor less its mean.
        let trace: f64 = (0..3).map(|k| i.deviator()[k][k].in_mpa()).sum();
        assert!(agree(trace, 0.0, 1e-13 * mean.abs().max(f64::MIN_POSITIVE)), "{}: {trace}", case.id);
        assert!(i.card().passed(), "{}: {:#?}", case.id, i.card().checks);
    }
}

#[test]
fn horizontal_stresses_of_a_tensor() {
    for case in cases("horizontal_stress") {
        let six = numbers(&case.inputs, "stress_ned");
        let h = stress_of(&six).horizontal_stresses();
        let got = [h.sh_max.in_mpa(), h.sh_min.in_mpa(), h.sv.in_mpa()];
        let want = [number(&case.outputs, "SHmax"), number(&case.outputs, "Shmin"), six[2]];
        assert_all_close(&case.id, &got, &want, RELATIVE);
        match case.outputs["azimuth"].as_f64() {
            Some(want) => {
                let got = h.sh_max_azimuth.expect("an azimuth").true_north().unwrap().in_deg();
                // As lines, and as good as the gap of the two stresses allows.
                let gap = (got - want + 90.0).rem_euclid(180.0) - 90.0;
                let noise = 1e-13 * h.sh_max.in_mpa().abs() / (h.sh_max - h.sh_min).in_mpa();
                assert!(gap.abs() <= RELATIVE * 180.0 + noise.to_degrees(), "{}: got {got}, want {want}", case.id);
            }
            None => assert_eq!(h.sh_max_azimuth, None, "{}", case.id),
        }
        assert!(h.card().passed(), "{}: {:#?}", case.id, h.card().checks);
    }
}

fn assert_regime(id: &str, r: &FaultingRegime, out: &serde_json::Value) {
    for (key, got) in [("phi", r.shape_ratio), ("a_phi", r.a_phi)] {
        match (got, out[key].as_f64()) {
            (Some(got), Some(want)) => assert!(agree(got, want, RELATIVE * 3.0), "{id} {key}: got {got}, want {want}"),
            (got, want) => assert_eq!(got, want, "{id} {key}"),
        }
    }
    // On a boundary the value is what counts, not the name.
    if let Some(name) = out["regime"].as_str() {
        assert_eq!(r.regime, regime(name), "{id}");
    }
    assert!(r.card().passed(), "{id}: {:#?}", r.card().checks);
}

#[test]
fn faulting_regime_of_three_magnitudes() {
    for case in cases("a_phi") {
        let s = Stress::from_horizontals(Horizontals {
            sv: number(&case.inputs, "Sv").mpa(),
            sh_max: number(&case.inputs, "SHmax").mpa(),
            sh_min: number(&case.inputs, "Shmin").mpa(),
            sh_max_azimuth: true_azimuth(35.0),
        })
        .unwrap();
        assert_regime(&case.id, &s.a_phi(), &case.outputs);
        assert_eq!(s.a_phi().regime, s.regime(), "{}", case.id);
    }
}

#[test]
fn faulting_regime_of_a_tilted_tensor() {
    for case in cases("a_phi_tensor") {
        let s = stress_of(&numbers(&case.inputs, "stress_ned"));
        assert_regime(&case.id, &s.a_phi(), &case.outputs);
        assert_eq!(s.a_phi().regime, s.regime(), "{}", case.id);
    }
}

#[test]
fn traction_on_a_plane() {
    for case in cases("plane_traction") {
        let six = numbers(&case.inputs, "stress_ned");
        let plane =
            Plane { strike: true_azimuth(number(&case.inputs, "strike")), dip: number(&case.inputs, "dip").deg() };
        let t = stress_of(&six).on(plane).unwrap();
        let out = &case.outputs;
        assert_all_close(&case.id, &t.vector().map(|c| c.in_mpa()), &numbers(out, "traction"), RELATIVE);
        let largest = six.iter().fold(0.0_f64, |m, c| m.max(c.abs()));
        let close = |key: &str, got: f64| {
            let want = number(out, key);
            assert!(agree(got, want, RELATIVE * largest), "{} {key}: got {got}, want {want}", case.id);
        };
        close("sigma_n", t.normal.in_mpa());
        close("sigma_n_eff", (t.normal - number(&case.inputs, "pore_pressure").mpa()).in_mpa());
        close("tau", t.shear.in_mpa());
        close("tau_strike", t.along_strike.in_mpa());
        close("tau_updip", -t.down_dip.in_mpa());
        match out["rake"].as_f64() {
            Some(want) => {
                let got = t.rake.expect("a rake").in_deg();
                // +180° and −180° are one rake.
                let gap = (got - want + 180.0).rem_euclid(360.0) - 180.0;
                let noise = (1e-13 * largest / number(out, "tau")).to_degrees();
                assert!(gap.abs() <= RELATIVE * 180.0 + noise, "{} rake: got {got}, want {want}", case.id);
            }
            None => assert_eq!(t.rake, None, "{}", case.id),
        }
    }
}
