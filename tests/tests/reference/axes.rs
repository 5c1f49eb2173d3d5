//! Fits of measured axes and directions against an independent numpy implementation (singular value
//! decomposition), to 1e-9 relative.

use super::stress::true_azimuth;
use hade::card::Explain;
use hade::prelude::*;
use hade_tests::{assert_all_close, cases, numbers};
use serde_json::Value;

const RELATIVE: f64 = 1e-9;

fn rows(value: &Value, key: &str) -> Vec<[f64; 3]> {
    let list = value[key].as_array().unwrap_or_else(|| panic!("{key} is no list"));
    let row = |v: &Value| [0, 1, 2].map(|i| v[i].as_f64().unwrap_or_else(|| panic!("{key} holds no numbers")));
    list.iter().map(row).collect()
}

/// Lines carry no sign, so each axis is compared by the end that agrees.
#[test]
fn the_nearest_axes_to_three_lines() {
    for case in cases("nearest_rotation") {
        let (trends, plunges) = (numbers(&case.inputs, "trends"), numbers(&case.inputs, "plunges"));
        let lines = [0, 1, 2].map(|k| Line { trend: true_azimuth(trends[k]), plunge: plunges[k].deg() });
        let fitted = MeasuredAxes { lines }.fitted().unwrap_or_else(|e| panic!("{}: {e}", case.id));
        let want = rows(&case.outputs, "axes_columns");
        for (k, axis) in fitted.matrix().iter().enumerate() {
            let column: Vec<f64> = want.iter().map(|row| row[k]).collect();
            let along: f64 = axis.iter().zip(&column).map(|(a, b)| a * b).sum();
            let column: Vec<f64> = column.iter().map(|c| c * along.signum()).collect();
            assert_all_close(&format!("{} axis {k}", case.id), axis, &column, RELATIVE);
        }
        assert!(fitted.card().passed(), "{}: {:#?}", case.id, fitted.card().checks);
    }
}

#[test]
fn the_best_rotation_of_matched_directions() {
    for case in cases("wahba_rotation") {
        let (measured, reference) = (rows(&case.inputs, "measured"), rows(&case.inputs, "reference"));
        let weights = numbers(&case.inputs, "weights");
        let pairs: Vec<DirectionPair> = (0..weights.len())
            .map(|k| DirectionPair { reference: reference[k], measured: measured[k], weight: weights[k] })
            .collect();
        let best = BestRotation::of(&pairs).unwrap_or_else(|e| panic!("{}: {e}", case.id));
        let want = rows(&case.outputs, "rotation");
        assert_all_close(&case.id, best.matrix().as_flattened(), want.as_flattened(), RELATIVE);
        if case.note.contains("favour a reflection") {
            assert!(best.favours_reflection(), "{}", case.id);
        }
        assert!(best.card().passed(), "{}: {:#?}", case.id, best.card().checks);
    }
}
