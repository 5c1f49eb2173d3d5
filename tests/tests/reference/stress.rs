//! Tensors and turns against an independent numpy implementation, to 1e-9 relative.

use hade::prelude::*;
use hade_tests::{assert_all_close, cases, number, numbers};

const RELATIVE: f64 = 1e-9;

pub fn stress_of(six: &[f64]) -> Stress {
    let [nn, ee, dd, ne, ed, nd] = <[f64; 6]>::try_from(six).expect("six components").map(|c| c.mpa());
    Stress::from_components(Components { nn, ee, dd, ne, nd, ed }).expect("finite components")
}

pub fn six_of<F: hade::frames::Frame>(s: &Stress<F>) -> Vec<f64> {
    use Axis::{X, Y, Z};
    [(X, X), (Y, Y), (Z, Z), (X, Y), (Y, Z), (X, Z)].iter().map(|&(a, b)| s.component(a, b).in_mpa()).collect()
}

pub fn true_azimuth(degrees: f64) -> Azimuth {
    Azimuth::from_true_north(degrees.deg())
}

#[test]
fn a_tensor_carried_to_a_hole() {
    for case in cases("tensor_to_well_frame") {
        let s = stress_of(&numbers(&case.inputs, "stress_ned"));
        let hole = Attitude {
            inclination: number(&case.inputs, "inclination").deg(),
            azimuth: true_azimuth(number(&case.inputs, "azimuth")),
        };
        let chain = hole.chain().unwrap();
        let carried = chain.carry(&s);
        assert_all_close(&case.id, &six_of(&carried), &numbers(&case.outputs, "stress_well"), RELATIVE);
        // The reference's numbers, stated in the hole's axes, come back as the tensor they were made of.
        let [xx, yy, zz, xy, yz, xz] =
            <[f64; 6]>::try_from(numbers(&case.outputs, "stress_well")).expect("six components").map(|c| c.mpa());
        let stated = Stress::from_components_in(&chain, AxisComponents { xx, yy, zz, xy, yz, xz }).unwrap();
        assert_all_close(&case.id, &six_of(&chain.back().carry(&stated)), &six_of(&s), RELATIVE);
    }
}

#[test]
fn the_axes_of_a_hole() {
    for case in cases("well_frame") {
        let hole = Attitude {
            inclination: number(&case.inputs, "inclination").deg(),
            azimuth: true_azimuth(number(&case.inputs, "azimuth")),
        };
        let rows = hole.chain().unwrap().matrix();
        for (row, axis) in rows.iter().zip(["high_side", "right", "along"]) {
            assert_all_close(&format!("{} {axis}", case.id), row, &numbers(&case.outputs, axis), RELATIVE);
        }
    }
}

#[test]
fn a_tensor_from_measured_principal_axes() {
    for case in cases("tensor_from_principal") {
        let magnitudes = numbers(&case.inputs, "magnitudes");
        let trends = numbers(&case.inputs, "trends");
        let plunges = numbers(&case.inputs, "plunges");
        let axis = |k: usize| (magnitudes[k].mpa(), Line { trend: true_azimuth(trends[k]), plunge: plunges[k].deg() });
        let s = Stress::from_principals([axis(0), axis(1), axis(2)]).unwrap_or_else(|e| panic!("{}: {e}", case.id));
        assert_all_close(&case.id, &six_of(&s), &numbers(&case.outputs, "stress_ned"), RELATIVE);
    }
}

#[test]
fn a_tensor_from_vertical_and_horizontal_stresses() {
    for case in cases("tensor_andersonian") {
        let s = Stress::from_horizontals(Horizontals {
            sv: number(&case.inputs, "Sv").mpa(),
            sh_max: number(&case.inputs, "SHmax").mpa(),
            sh_min: number(&case.inputs, "Shmin").mpa(),
            sh_max_azimuth: true_azimuth(number(&case.inputs, "azimuth_SHmax")),
        })
        .unwrap_or_else(|e| panic!("{}: {e}", case.id));
        assert_all_close(&case.id, &six_of(&s), &numbers(&case.outputs, "stress_ned"), RELATIVE);
    }
}

#[test]
fn principal_stresses_and_their_axes() {
    for case in cases("principal") {
        let p = stress_of(&numbers(&case.inputs, "stress_ned")).principals();
        let values = numbers(&case.outputs, "values");
        assert_all_close(&case.id, &p.magnitudes().map(|m| m.in_mpa()), &values, RELATIVE);
        let largest = values.iter().fold(0.0_f64, |m, v| m.max(v.abs()));
        let axes = case.outputs["axes"].as_array().expect("axes");
        for (k, line) in p.lines().into_iter().enumerate() {
            let defined = case.outputs["axis_defined"][k].as_bool().expect("axis_defined");
            assert_eq!(line.is_some(), defined, "{} axis {k}", case.id);
            let Some(line) = line else { continue };
            let trend = line.trend.true_north().unwrap().in_rad();
            let plunge = line.plunge.in_rad();
            let ours = [plunge.cos() * trend.cos(), plunge.cos() * trend.sin(), plunge.sin()];
            let theirs: Vec<f64> =
                axes[k].as_array().expect("axis").iter().map(|v| v.as_f64().expect("number")).collect();
            let gap = values
                .iter()
                .enumerate()
                .filter(|(j, _)| *j != k)
                .map(|(_, v)| (v - values[k]).abs())
                .fold(f64::INFINITY, f64::min);
            // An axis is as good as the gap to its neighbour allows.
            let tolerance = 1e-9_f64.max(1e-14 * largest / gap);
            let along: f64 = ours.iter().zip(&theirs).map(|(a, b)| a * b).sum();
            let across: f64 = ours.iter().zip(&theirs).map(|(a, b)| (a - along * b).powi(2)).sum::<f64>().sqrt();
            assert!(across <= tolerance, "{} axis {k}: {across:e} off (gap {gap:e})", case.id);
        }
    }
}
