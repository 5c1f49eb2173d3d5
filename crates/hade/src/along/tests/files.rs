//! A hole along its layers whose intervals, sections and muds come from files.

use super::*;
use crate::card::Standing;

fn written(name: &str, text: &str) -> std::path::PathBuf {
    let path = std::env::temp_dir().join(format!("hade-{name}-{}.csv", std::process::id()));
    std::fs::write(&path, text).unwrap();
    path
}

/// At one true vertical depth the limits change where the rock does; files stand for what is in them, and the record
/// holds the rest.
#[test]
fn a_level_hole_from_files() {
    let intervals = written(
        "lateral",
        "# datum: rotary table\n# depth_unit: m\n# pressure_unit: MPa\n# angle_unit: deg\nfrom,to,layer,poisson,t0,cohesion,friction_angle,k_min,k_max,wall,biot\n2900,3000,shale,0.25,2,8,30,0.62,0.8,,\n3000,3300,sand,0.2,1,12,38,0.55,0.75,permeable,0.9\n3300,3500,shale,0.25,2,8,30,0.62,0.8,,\n",
    );
    let sections = written(
        "sections",
        "# datum: rotary table\n# depth_unit: m\n# mud_weight_unit: sg\n# pressure_unit: bar\nsection,from,to,mud_weight,ecd,swab,surge\nbuild,2900,3000,1.3,,,\nlateral,3000,3500,1.35,1.42,5,\n",
    );
    let lateral = Ground::read_intervals(&intervals).unwrap();
    let muds = HoleSection::read_csv(&sections).unwrap();
    std::fs::remove_file(&intervals).unwrap();
    std::fs::remove_file(&sections).unwrap();
    let ground = by_ratios(lateral.layers()).with_intervals_from(&lateral).unwrap();
    let level = [(0.0, 0.0), (2000.0, 0.0), (2800.0, 90.0), (3600.0, 90.0)].map(|(md, i)| station(md, i, 120.0));
    let survey = Survey::from_stations(&level).unwrap();
    let log = LimitLog::with_choices(&survey, &ground, choices(2900.0, 3500.0, 50.0, 0.0)).unwrap();
    let log = log.with_sections(&muds).unwrap();
    let rows = log.rows();
    for row in &rows {
        assert_eq!(row.layer() == "sand", row.lower_shear != rows[0].lower_shear, "{row:?}");
    }
    let at_contact: Vec<&str> = rows.iter().filter(|row| row.md == 3000.m()).map(LogRow::layer).collect();
    assert_eq!(at_contact, ["shale", "sand"]);
    let card = log.card();
    assert!(card.passed(), "{:#?}", card.checks.iter().filter(|c| !c.passed).collect::<Vec<_>>());
    assert_eq!(LimitLog::compute(log.inputs()).unwrap().card(), card);
    let inputs = &card.explanation.inputs;
    let count = |words: &str| inputs.iter().filter(|item| item.name.contains(words)).count();
    assert_eq!([count("intervals of layers"), count("and its mud"), count("cohesion"), count("Biot")], [1, 2, 0, 0]);
    let of_files = ["sand", "shale", "build", "lateral"];
    let stated = inputs
        .iter()
        .find(|item| item.standing == Standing::Value && of_files.iter().any(|name| item.name.contains(name)));
    assert_eq!(stated, None);
    let swabbed = log.section_ranges()[1].mud.iter().any(|held| held.state == crate::well::MudState::Swabbed);
    assert!(swabbed && log.section_ranges()[0].mud.len() == 2);
    // A ground that lacks a layer of the file says so.
    let other = by_ratios(vec![Layer::from("marl", at_rt(0.0), shale()).unwrap().horizontal_ratios(0.6, 0.7).unwrap()]);
    assert!(other.with_intervals_from(&lateral).unwrap_err().to_string().contains("it has marl"));
}
