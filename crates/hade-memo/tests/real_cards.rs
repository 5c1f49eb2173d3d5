//! Cards of the library itself: every one is computed again, and every formula is typeset.

mod support;

use hade::prelude::*;
use hade::well::{Wall, WallInputs};
use hade_memo::{MemoInput, MemoOptions, build};
use support::{folder, project};

#[test]
fn cards_of_the_library_are_computed_again_and_their_formulas_typeset() {
    let folder = folder("real");
    let mut sheet = Sheet::new("Kestrel Flat KF-3: wall stability of the 8½ in hole");
    sheet.site("Kestrel Flat");
    sheet.place("KF-3");
    sheet.purpose("To bring the stress into the axes of the hole.");
    sheet.scope("2950 m TVD.");
    let sv = sheet.given(
        "S_v",
        "vertical stress at 2950 m TVD",
        66.9.mpa().give_or_take(1.3.mpa()),
        Source::measured("density log KF-1, integrated"),
    );
    let sh = sheet.given(
        "S_hmin",
        "least horizontal stress at 2950 m",
        47.1.mpa(),
        Source::measured("extended leak-off test KF-3"),
    );
    let sh_max =
        sheet.given("S_Hmax", "greatest horizontal stress", 58.2.mpa(), Source::correlation("breakout width, KF-1"));
    let decl = sheet.given("D", "declination", (-2.5).deg(), Source::measured("survey company's certificate"));
    let pick = sheet.given(
        "A_b",
        "breakout azimuth, magnetic",
        Azimuth::from_magnetic_north(127.deg()),
        Source::measured("image log, 11 picks"),
    );
    let pore = sheet.given("P_p", "pore pressure", 30.mpa(), Source::measured("pressure point"));
    let c = sheet.given("c", "cohesion", 10.mpa(), Source::measured("core"));
    let phi = sheet.given("φ", "friction angle", 30.deg(), Source::measured("core"));
    let t0 = sheet.given("T_0", "tensile strength", 2.mpa(), Source::measured("core"));
    let nu = sheet.given("ν", "Poisson's ratio", 0.25, Source::measured("core"));
    let breakout = pick.with_declination(decl).unwrap();
    let s = Stress::from_horizontals(Horizontals { sv, sh_max, sh_min: sh, sh_max_azimuth: breakout.perpendicular() })
        .unwrap();
    let p = s.principals();
    sheet.add(&p);
    sheet.add(&s.mohr());
    let i = sheet.given("i", "inclination", 42.deg(), Source::measured("survey"));
    let a = sheet.given("a", "azimuth", Azimuth::from_true_north(120.deg()), Source::measured("survey"));
    let hole = Attitude { inclination: i, azimuth: a };
    let chain = hole.chain().unwrap();
    sheet.add(&chain);
    let carried = chain.carry(&s);
    sheet.add(&carried);
    let rock = Rock { poisson: nu, tensile_strength: t0, strength: Strength::mohr_coulomb(c, phi) };
    let wall = Wall::new(WallInputs { stress: carried, pore, rock }).unwrap();
    sheet.add(&wall.limits());
    sheet.add(&wall.around(40.mpa()).unwrap());
    sheet.add(&wall.failing_arcs(35.mpa()).unwrap());
    sheet.add(&wall.stress_at(40.mpa(), 30.deg()).unwrap());
    sheet.conclude("The stress in borehole axes is that of item 6.");
    let json = sheet.record().to_json().unwrap();
    let input = MemoInput {
        record_json: &json,
        notebook: ("kf3.ipynb", support::NOTEBOOK),
        folder: &folder,
        project: Some(&project()),
    };
    let memo = build(&input, &MemoOptions::default()).unwrap();
    std::fs::write(folder.join("memo.pdf"), &memo.pdf).unwrap();
    assert_eq!(memo.warnings, Vec::<String>::new());
    assert!(!memo.against_issue.iter().any(|a| a.contains("failed check")), "{:#?}", memo.against_issue);
    // The two pressures that were typed into the cells, and nothing else.
    let unmatched = memo.against_issue.iter().filter(|a| a.contains("is not on the sheet")).count();
    assert_eq!(unmatched, 3, "{:#?}", memo.against_issue);
}
