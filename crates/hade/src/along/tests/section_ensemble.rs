//! Whole sections whose inputs are drawn.

use super::*;

/// Strong rock in a vertical hole, so that the only end near the mud is S_hmin: 0.6 of the effective vertical stress above
/// 2000 m, 0.65 below.
fn strong_section(mud: Option<MudPlan>) -> LimitLog {
    let strong = Rock { strength: Strength::mohr_coulomb(30.mpa(), 40.deg()), ..shale() };
    let layer = |name: &str, top: f64, k: f64| {
        Layer::from(name, at_rt(top), strong).unwrap().horizontal_ratios(k, k + 0.12).unwrap()
    };
    let ground = by_ratios(vec![layer("upper", 500.0, 0.6), layer("lower", 2000.0, 0.65)]);
    let hole = Survey::from_stations(&[station(0.0, 0.0, 0.0), station(3000.0, 0.0, 0.0)]).unwrap();
    let log = LimitLog::with_choices(&hole, &ground, choices(1500.0, 2500.0, 100.0, 0.0)).unwrap();
    let section = HoleSection::between("8½ in", 1500.m(), 2500.m());
    log.with_sections(&[mud.map_or(section, |mud| section.with_mud(mud))]).unwrap()
}

/// The standard normal distribution function from a table (Abramowitz and Stegun 1964, table 26.1; from memory).
const PHI: [(f64, f64); 3] = [(0.5, 0.691_462), (1.0, 0.841_345), (2.0, 0.977_250)];

/// Where S_hmin alone is drawn and governs, the share of a layer is Φ((S_hmin − ρ g z) / s) at its shallowest depth: with a
/// mud at rest that is one, half or two deviations below there.
#[test]
fn the_share_is_the_normal_distribution_where_one_input_governs() {
    let s = 0.8;
    // At 1500 m: S_v 33.9, P_p 15.6, S_hmin 15.6 + 0.6 · 18.3 = 26.58 MPa; at 2000 m in the lower layer 20.8 + 0.65 · 24.4.
    let upper = |weight: f64| (26.58 - weight * 9.80665e-6 * 1500.0) / s;
    let lower = |weight: f64| (36.66 - weight * 9.80665e-6 * 2000.0) / s;
    for (deviations, share) in PHI {
        let weight = (26.58 - deviations * s) / (9.80665e-6 * 1500.0);
        let plan =
            MudPlan { static_density: (weight / 1000.0).sg(), swab: None, circulating_density: None, surge: None };
        let log = strong_section(Some(plan));
        let draws = Draws { count: 20_000, start: 11 };
        let chance = log.section_ensemble("8½ in", draws, &[Vary::sh_min(s.mpa())]).unwrap();
        assert!((upper(weight) - deviations).abs() < 1e-9 && lower(weight) > deviations + 1.0);
        let planned = chance.planned().unwrap();
        // Four standard errors.
        let error = 4.0 * (share * (1.0 - share) / 20_000.0_f64).sqrt();
        assert!((planned.together - share).abs() < error, "{planned:?} {share}");
        // The lower layer holds in almost every draw, and its share is a factor.
        assert!(planned.by_layer <= planned.together && planned.by_layer > planned.together - 0.05, "{planned:?}");
        let card = chance.card();
        assert!(card.passed(), "{:#?}", card.checks);
        assert_eq!(SectionEnsemble::compute(chance.inputs()).unwrap().card(), card);
    }
}

/// One depth alone is the ensemble of its wall; and whatever is drawn, the shares of the layers bound that of the section.
#[test]
fn the_shares_of_layers_bound_that_of_the_section() {
    let log = strong_section(None);
    let spreads = [Vary::sh_min(1.5.mpa()), Vary::sh_max(1.mpa()), Vary::pore(1.mpa()), Vary::cohesion(6.mpa())];
    let draws = Draws { count: 3_000, start: 4 };
    let chance = log.section_ensemble("8½ in", draws, &spreads).unwrap().correlated("S_hmin", "P_p", 0.5).unwrap();
    assert!(chance.card().passed(), "{:#?}", chance.card().checks);
    let layers = chance.layers();
    let best = chance.best().unwrap();
    let shares: Vec<f64> = layers.iter().map(|layer| layer.best.unwrap()).collect();
    assert_eq!(layers.iter().map(|layer| layer.layer()).collect::<Vec<_>>(), ["upper", "lower"]);
    // Fréchet's bounds, and the product.
    let (least, sum) = (shares[0].min(shares[1]), shares[0] + shares[1]);
    assert!(best.together <= least + 1e-12 && best.together >= sum - 1.0 - 1e-12, "{best:?} {shares:?}");
    assert!((best.by_layer - shares[0] * shares[1]).abs() < 1e-12);
    assert!(chance.shares().iter().all(|place| place.together <= best.together));
    // Rock that fails at once keeps nothing.
    let [low, _, high] = chance.bottom().unwrap();
    assert!(low < high && chance.top().unwrap()[0] < chance.top().unwrap()[2]);
}

#[test]
fn what_makes_no_section_is_refused() {
    let log = strong_section(None);
    let draws = Draws { count: 1_000, start: 1 };
    let said = |name: &str, draws: Draws, spreads: &[Vary]| {
        log.section_ensemble(name, draws, spreads).unwrap_err().to_string()
    };
    let one = [Vary::sh_min(1.mpa())];
    assert_eq!(said("12¼ in", draws, &one), "The section \"12¼ in\": the log has no such section; it has 8½ in.");
    assert!(said("8½ in", Draws { count: 2_000_000, start: 1 }, &one).contains("at most 1"));
    assert!(said("8½ in", Draws { count: 10, start: 1 }, &one).contains("between 100 and 2000000"));
    assert!(said("8½ in", draws, &[]).contains("number of uncertain inputs is 0"));
    assert!(said("8½ in", draws, &[one[0], one[0]]).contains("stands twice"));
    assert!(said("8½ in", draws, &[Vary::sh_min(0.mpa())]).contains("above zero"));
    assert!(said("8½ in", draws, &[Vary::ucs(3.mpa())]).starts_with("The ensemble at MD 1500 m in upper: "));
    let whole = LimitLog::with_choices(log.survey(), log.ground(), log.choices()).unwrap();
    assert!(whole.section_ensemble("8½ in", draws, &one).unwrap_err().to_string().contains(".with_sections("));
}
