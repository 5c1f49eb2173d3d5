//! Vertical stresses that can be, but seldom are: a unit or the level of the depths may have been mistaken.

use crate::units::{Length, Pressure, Quantity, fixed};

/// The weight of what lies above a depth is between that of water and that of heavy rock, kPa for each metre
/// (common practice, no source).
const OVERBURDEN: [f64; 2] = [9.0, 30.0];
/// Above this depth, metres, water, air below the rotary table and slopes count for too much.
const SHALLOW: f64 = 200.0;
/// What of vertical stresses, each with its true vertical depth below the rotary table, is to be looked at again: the
/// heaviest and the lightest ground, and where they fall with depth.
pub(crate) fn doubts_of_overburden(rows: &[(Length, Pressure)]) -> Vec<String> {
    let mut doubts = Vec::new();
    let per_metre = |(tvd, sv): &(Length, Pressure)| sv.si() * 1e-3 / tvd.si();
    let deep = rows.iter().filter(|(tvd, _)| tvd.si() >= SHALLOW);
    let beyond = |row: &&(Length, Pressure)| per_metre(row) < OVERBURDEN[0] || per_metre(row) > OVERBURDEN[1];
    let far = |row: &(Length, Pressure)| (per_metre(row) / OVERBURDEN[1]).max(OVERBURDEN[0] / per_metre(row));
    if let Some(worst) = deep.filter(beyond).max_by(|a, b| far(a).total_cmp(&far(b))) {
        doubts.push(format!(
            "Doubtful input: S_v {} at TVD {} m is {} kPa for each metre below the rotary table, and ground weighs {} to {}; see whether the unit of the stress or the level of the depths was mistaken.",
            worst.1,
            fixed(worst.0.si(), 1),
            fixed(per_metre(worst), 1),
            OVERBURDEN[0],
            OVERBURDEN[1]
        ));
    }
    let mut by_depth: Vec<&(Length, Pressure)> = rows.iter().collect();
    by_depth.sort_by(|a, b| a.0.si().total_cmp(&b.0.si()));
    let falls = by_depth.windows(2).find_map(|pair| match pair {
        [above, below] if below.0 > above.0 && below.1.si() < above.1.si() - 1.0 => Some((above, below)),
        _ => None,
    });
    if let Some((above, below)) = falls {
        doubts.push(format!(
            "Doubtful input: S_v falls with depth, from {} at TVD {} m to {} at {} m; what lies between them would have to weigh less than nothing.",
            above.1,
            fixed(above.0.si(), 1),
            below.1,
            fixed(below.0.si(), 1)
        ));
    }
    doubts
}

#[cfg(test)]
mod tests {
    use super::*;
    use crate::units::Units;

    #[test]
    fn ground_that_weighs_too_much_or_less_with_depth_is_doubted() {
        let doubts = doubts_of_overburden;
        assert_eq!(doubts(&[(2000.m(), 46.mpa()), (2100.m(), 48.mpa()), (2050.m(), 47.mpa())]), Vec::<String>::new());
        assert_eq!(
            doubts(&[(2218.m(), 468.mpa())]),
            [
                "Doubtful input: S_v 468.00 MPa at TVD 2218.0 m is 211.0 kPa for each metre below the rotary table, and ground weighs 9 to 30; see whether the unit of the stress or the level of the depths was mistaken."
            ]
        );
        assert!(doubts(&[(2218.m(), 4.68.mpa())])[0].contains("2.1 kPa"));
        assert_eq!(doubts(&[(100.m(), 5.mpa())]).len(), 0);
        assert!(doubts(&[(2000.m(), 46.mpa()), (2100.m(), 44.mpa())])[0].contains("falls with depth"));
    }
}
