//! Depths from one level of a hole to another.

use hade::prelude::*;
use hade_tests::agree;
use proptest::prelude::*;

use crate::CASES;

/// What two depths that must be equal may differ by, metres: a few last bits of 12 km.
const MEET: f64 = 1e-11;

/// A hole on land or at sea, with the three levels it has.
fn hole() -> impl Strategy<Value = (DatumTie, [Datum; 3])> {
    let land = (-400.0..6000.0_f64, 0.0..60.0_f64).prop_map(|(ground, above)| {
        let tie = DatumTie::rotary_table_at((ground + above).m()).unwrap().with_ground_at(ground.m()).unwrap();
        (tie, [Datum::RotaryTable, Datum::MeanSeaLevel, Datum::Ground])
    });
    let sea = (0.0..80.0_f64, -4000.0..0.0_f64).prop_map(|(rotary, mudline)| {
        let tie = DatumTie::rotary_table_at(rotary.m()).unwrap().with_mudline_at(mudline.m()).unwrap();
        (tie, [Datum::RotaryTable, Datum::MeanSeaLevel, Datum::Mudline])
    });
    prop_oneof![land, sea]
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES))]

    #[test]
    fn there_and_back_and_over_a_third_level((tie, levels) in hole(), tvd in -6000.0..12_000.0_f64) {
        for from in levels {
            let depth = Depth { tvd: tvd.m(), below: from };
            for to in levels {
                let there = tie.convert(depth, to).unwrap();
                prop_assert_eq!(there.below, to);
                prop_assert!(agree(tie.convert(there, from).unwrap().tvd.in_m(), tvd, MEET));
                for over in levels {
                    let way = tie.convert(tie.convert(depth, over).unwrap(), to).unwrap();
                    prop_assert!(agree(way.tvd.in_m(), there.tvd.in_m(), MEET), "{:?} {:?} {:?}", from, over, to);
                }
                // Deeper stays deeper, by the same length.
                let deeper = tie.convert(Depth { tvd: (tvd + 10.0).m(), below: from }, to).unwrap();
                prop_assert!(agree((deeper.tvd - there.tvd).in_m(), 10.0, MEET));
            }
        }
    }

    #[test]
    fn a_pressure_does_not_depend_on_the_level_of_its_table(
        (tie, levels) in hole(),
        top in 500.0..2000.0_f64,
        share in 0.0..1.0_f64,
        pressures in (0.0..50.0_f64, 50.0..100.0_f64),
    ) {
        let below = |tvd: f64, level: Datum| tie.convert(Depth::below_rotary_table(tvd.m()), level).unwrap();
        let asked = top + share * 1500.0;
        let expected = pressures.0 + share * (pressures.1 - pressures.0);
        for level in levels {
            let points = [
                (below(top, level).tvd, pressures.0.mpa()),
                (below(top + 1000.0, level).tvd, (pressures.0 + (pressures.1 - pressures.0) / 1.5).mpa()),
                (below(top + 1501.0, level).tvd, (pressures.0 + (pressures.1 - pressures.0) * 1501.0 / 1500.0).mpa()),
            ];
            let profile = PressureProfile::from_points(&points, level).unwrap().tied(tie).unwrap();
            for from in levels {
                if asked - top < 1e-6 {
                    continue;
                }
                let at = profile.at(below(asked, from)).unwrap();
                prop_assert!(agree(at.pressure.in_mpa(), expected, 1e-10), "{} {}", at.pressure, expected);
                let mud = expected.mpa().mud_weight_at(asked.m());
                prop_assert!(agree(at.mud_weight.unwrap().in_sg(), mud.in_sg(), 1e-11));
            }
        }
    }
}

proptest! {
    #![proptest_config(ProptestConfig::with_cases(CASES / 100))]

    #[test]
    fn every_conversion_passes_its_own_checks((tie, levels) in hole(), tvd in -6000.0..12_000.0_f64) {
        for from in levels {
            for to in levels {
                let card = tie.conversion(Depth { tvd: tvd.m(), below: from }, to).unwrap().card();
                prop_assert!(card.passed(), "{:#?}", card.checks);
            }
        }
    }
}
