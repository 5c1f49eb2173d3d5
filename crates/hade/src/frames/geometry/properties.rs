//! What holds for all lines and planes.

#![cfg(test)]

use proptest::prelude::*;

use crate::frames::{Azimuth, Line, MeasuredAxes, Plane};
use crate::prelude::{Card, Explain, Units};

const CASES: u32 = if cfg!(debug_assertions) { 2_000 } else { 100_000 };

fn true_north(degrees: f64) -> Azimuth {
    Azimuth::from_true_north(degrees.deg())
}
fn any_line() -> impl Strategy<Value = Line> {
    (0.0..360.0_f64, -90.0..=90.0_f64).prop_map(|(t, p)| Line { trend: true_north(t), plunge: p.deg() })
}
fn any_plane() -> impl Strategy<Value = Plane> {
    (0.0..360.0_f64, 0.0..=90.0_f64).prop_map(|(s, d)| Plane { strike: true_north(s), dip: d.deg() })
}
fn other_end(line: Line) -> Line {
    Line { trend: line.trend.turned_by(180.deg()), plunge: -line.plunge }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES))]

    #[test]
    fn either_end_is_the_same_line(line in any_line(), other in any_line(), plane in any_plane()) {
        let end = other_end(line);
        prop_assert!(line.angle_to(&end).unwrap().in_deg() < 1e-12);
        prop_assert!(line.lower_end().unwrap().angle_to(&line).unwrap().in_deg() < 1e-12);
        prop_assert!(line.lower_end().unwrap().plunge.in_deg() >= 0.0);
        let gap = |a: crate::prelude::Angle, b: crate::prelude::Angle| (a - b).abs().in_deg();
        prop_assert!(gap(line.angle_to(&other).unwrap(), end.angle_to(&other).unwrap()) < 1e-12);
        prop_assert!(gap(line.angle_to_plane(&plane).unwrap(), end.angle_to_plane(&plane).unwrap()) < 1e-12);
        let across = [line, end].map(|l| Plane::across(l).unwrap());
        prop_assert!(across[0].angle_to(&across[1]).unwrap().in_deg() < 1e-12);
    }

    #[test]
    fn a_plane_and_its_pole_go_there_and_back(plane in any_plane()) {
        let back = Plane::across(plane.pole().unwrap()).unwrap();
        prop_assert!(back.angle_to(&plane).unwrap().in_deg() < 1e-12);
        let again = Plane::from_dip_direction(plane.dip_direction(), plane.dip);
        prop_assert!(again.angle_to(&plane).unwrap().in_deg() < 1e-12);
    }

    #[test]
    fn rake_there_and_back(plane in any_plane(), rake in -180.0..=180.0_f64) {
        let line = plane.line_at_rake(rake.deg()).unwrap().line;
        let found = plane.rake_of(line).unwrap();
        prop_assert!(found.misfit.in_deg() < 1e-9);
        let gap = (found.up.in_deg() - rake).to_radians().sin().asin().to_degrees();
        prop_assert!(gap.abs() < 1e-9, "{rake} came back as {:?}", found.up);
        prop_assert!((0.0..180.0).contains(&found.up.in_deg()));
        prop_assert!((found.up - found.down - 180.deg()).abs().in_deg() < 1e-12);
    }

    #[test]
    fn a_plane_through_two_lines_contains_both(a in any_line(), b in any_line()) {
        let between = a.angle_to(&b).unwrap().in_deg();
        prop_assume!(between > 1.0);
        let plane = Plane::through(a, b).unwrap().plane;
        for line in [a, b, other_end(a), other_end(b)] {
            prop_assert!(line.angle_to_plane(&plane).unwrap().in_deg() < 1e-10, "{between}");
        }
        let swapped = Plane::through(other_end(b), a).unwrap().plane;
        prop_assert!(swapped.angle_to(&plane).unwrap().in_deg() < 1e-10);
    }

    #[test]
    fn the_line_of_two_planes_lies_in_both(a in any_plane(), b in any_plane()) {
        prop_assume!(a.angle_to(&b).unwrap().in_deg() > 1.0);
        let line = a.intersection(b).unwrap().line;
        for plane in [a, b] {
            prop_assert!(line.angle_to_plane(&plane).unwrap().in_deg() < 1e-10);
        }
        let back = Plane::through(line, a.pole().unwrap()).unwrap().plane;
        prop_assert!(back.angle_to(&Plane::across(line).unwrap()).unwrap().in_deg() > 89.999_999);
    }

    #[test]
    fn the_trace_in_a_section_is_the_line_of_plane_and_section(plane in any_plane(), azimuth in 0.0..360.0_f64) {
        let section = Plane { strike: true_north(azimuth), dip: 90.deg() };
        prop_assume!(plane.angle_to(&section).unwrap().in_deg() > 1.0);
        let apparent = plane.apparent_dip(true_north(azimuth)).unwrap();
        let line = plane.intersection(section).unwrap().line;
        prop_assert!(apparent.trace.angle_to(&line).unwrap().in_deg() < 1e-9);
        prop_assert!(apparent.dip.abs().in_deg() <= plane.dip.in_deg() + 1e-9);
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES / 20))]

    /// Cards pass their own checks whatever the input, and the fit does not depend on the order or
    /// the ends of the lines.
    #[test]
    fn every_card_passes_its_checks(a in any_line(), b in any_line(), p in any_plane(), q in any_plane(), rake in -180.0..=180.0_f64) {
        let mut cards: Vec<Card> = vec![p.line_at_rake(rake.deg()).unwrap().card()];
        cards.extend(Plane::through(a, b).ok().map(|r| r.card()));
        cards.extend(p.intersection(q).ok().map(|r| r.card()));
        cards.extend(p.apparent_dip(a.trend).ok().map(|r| r.card()));
        cards.extend(p.rake_of(a).ok().map(|r| r.card()));
        let near = Line { plunge: p.line_at_rake(rake.deg()).unwrap().line.plunge.scale(0.97), ..p.line_at_rake(rake.deg()).unwrap().line };
        cards.extend(p.rake_of(near).ok().map(|r| r.card()));
        cards.extend(MeasuredAxes { lines: [p.pole().unwrap(), near, b] }.fitted().ok().map(|r| r.card()));
        for card in cards {
            let failed: Vec<_> = card.checks.iter().filter(|c| !c.passed).collect();
            prop_assert!(card.passed(), "{}: {failed:#?}", card.title());
        }
    }

    #[test]
    fn the_fit_of_axes_treats_the_lines_alike(t in 0.0..360.0_f64, d in 1.0..90.0_f64, r in -180.0..180.0_f64, e in proptest::array::uniform6(-3.0..3.0_f64)) {
        let plane = Plane { strike: true_north(t), dip: d.deg() };
        let in_plane = |rake: f64| plane.line_at_rake(((rake + 540.0).rem_euclid(360.0) - 180.0).deg()).unwrap().line;
        let off = |l: Line, dt: f64, dp: f64| Line { trend: l.trend.turned_by(dt.deg()), plunge: (l.plunge.in_deg() + dp).min(90.0).deg() };
        let lines = [off(in_plane(r), e[0], e[1]), off(in_plane(r + 90.0), e[2], e[3]), off(plane.pole().unwrap(), e[4], e[5])];
        let fitted = MeasuredAxes { lines }.fitted().unwrap();
        let [a, b, c] = fitted.lines();
        for (one, two) in [(a, b), (a, c), (b, c)] {
            prop_assert!((one.angle_to(&two).unwrap().in_deg() - 90.0).abs() < 1e-10);
        }
        let mixed = MeasuredAxes { lines: [other_end(lines[2]), lines[0], other_end(lines[1])] }.fitted().unwrap().lines();
        for (one, two) in [(a, mixed[1]), (b, mixed[2]), (c, mixed[0])] {
            prop_assert!(one.angle_to(&two).unwrap().in_deg() < 1e-9);
        }
    }
}
