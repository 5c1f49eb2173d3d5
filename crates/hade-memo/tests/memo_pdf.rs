mod support;
use hade::prelude::*;
use hade_memo::MemoOptions;
use support::{AGREES, folder, memo, project, record};

fn options() -> MemoOptions {
    let mut o = MemoOptions::default();
    o.template = std::env::var_os("TEMPLATE").map(Into::into);
    o
}

#[test]
fn prints() {
    let folder = folder("prints");
    let json = record(&folder).to_json().unwrap();
    let memo = memo(&json, &folder, Some(&project()), &options(), AGREES).unwrap();
    std::fs::write(folder.join("memo.pdf"), &memo.pdf).unwrap();
    eprintln!("{} pages, {} bytes: {}", memo.pages, memo.pdf.len(), folder.display());
    eprintln!("{:#?}\n{:#?}", memo.against_issue, memo.warnings);
}

#[test]
fn real() {
    let folder = folder("real");
    let mut sheet = Sheet::new("Kestrel Flat KF-3: wall stability of the 8½ in hole");
    sheet.site("Kestrel Flat");
    sheet.place("KF-3");
    sheet.purpose("To bring the stress into the axes of the hole.");
    sheet.scope("2950 m TVD.");
    let sv = sheet.given("S_v", "vertical stress at 2950 m TVD", 66.9.mpa().give_or_take(1.3.mpa()), Source::measured("density log KF-1, integrated"));
    let sh = sheet.given("S_hmin", "least horizontal stress at 2950 m", 47.1.mpa(), Source::measured("extended leak-off test KF-3"));
    let sh_max = sheet.given("S_Hmax", "greatest horizontal stress", 58.2.mpa(), Source::correlation("breakout width, KF-1"));
    let decl = sheet.given("D", "declination", (-2.5).deg(), Source::measured("survey company's certificate"));
    let pick = sheet.given("A_b", "breakout azimuth, magnetic", Azimuth::from_magnetic_north(127.deg()), Source::measured("image log, 11 picks"));
    let breakout = pick.with_declination(decl).unwrap();
    let s = Stress::from_horizontals(Horizontals { sv, sh_max, sh_min: sh, sh_max_azimuth: breakout.perpendicular() }).unwrap();
    let p = s.principals();
    sheet.add(&p);
    sheet.add(&s.mohr());
    let hole = Attitude { inclination: 42.deg(), azimuth: Azimuth::from_true_north(120.deg()) };
    let chain = hole.chain().unwrap();
    sheet.add(&chain);
    let carried = chain.carry(&s);
    sheet.add(&carried);
    sheet.conclude("The stress in borehole axes is that of item 5.");
    let json = sheet.record().to_json().unwrap();
    std::fs::write(folder.join("record.json"), &json).unwrap();
    let input = hade_memo::MemoInput { record_json: &json, notebook: ("kf3.ipynb", support::NOTEBOOK), folder: &folder, project: Some(&project()) };
    let t = std::time::Instant::now();
    let memo = hade_memo::build(&input, &options()).unwrap();
    eprintln!("{:?}", t.elapsed());
    let t = std::time::Instant::now();
    let memo2 = hade_memo::build(&input, &options()).unwrap();
    eprintln!("{:?}", t.elapsed());
    assert!(memo.pdf == memo2.pdf);
    std::fs::write(folder.join("memo.pdf"), &memo.pdf).unwrap();
    eprintln!("{} pages, {} bytes: {}", memo.pages, memo.pdf.len(), folder.display());
    eprintln!("{:#?}\n{:#?}", memo.against_issue, memo.warnings);
}
