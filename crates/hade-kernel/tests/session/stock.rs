//! The engine as it comes, with nothing of this crate around it, loads `hade` as any other dependency.

use std::env;
use std::time::Instant;

use evcxr::CommandContext;

use super::{Bench, Test};

pub const TESTS: &[(&str, Test)] = &[("the_plain_engine_loads_the_crate", the_plain_engine_loads_the_crate)];

fn the_plain_engine_loads_the_crate(_: &mut Bench) {
    let work = tempfile::tempdir().expect("a folder");
    // SAFETY: no session runs now, and nothing else in this program looks at these.
    unsafe {
        env::set_var("EVCXR_CONFIG_DIR", work.path().join("settings"));
        env::set_var("EVCXR_TMPDIR", work.path());
    }
    let (mut context, outputs) = CommandContext::new().expect("the engine starts");
    // Nobody reads what it prints; the channels hold it.
    let _outputs = outputs;
    let begun = Instant::now();
    let library = concat!(env!("CARGO_MANIFEST_DIR"), "/../hade");
    // Optimised it would build for minutes.
    context.execute(":opt 0").expect("the engine's own command");
    if let Err(error) = context.execute(&format!(":dep hade = {{ path = {library:?} }}\nuse hade::prelude::*;")) {
        let said = error.to_string();
        // It chooses versions itself, and asks the registry for them.
        let offline = ["failed to download", "failed to get", "network"].iter().any(|words| said.contains(words));
        assert!(offline && env::var_os("HADE_REQUIRE_CLIENTS").is_none(), "{said}");
        return println!("SKIPPED: the registry cannot be reached");
    }
    println!("loaded after {:.0} s", begun.elapsed().as_secs_f64());
    context.execute("let sv = 66.9.mpa();").expect("a value is kept");
    let shown = context
        .execute(
            "let s = Stress::from_horizontals(Horizontals { sv, sh_max: 60.mpa(), sh_min: 48.mpa(), \
             sh_max_azimuth: Azimuth::from_true_north(35.deg()) })?;\ns.principals()",
        )
        .expect("a card");
    let html = shown.get("text/html").expect("HTML");
    assert!(html.contains("66.9") && html.contains("<table"), "{html}");
    assert!(shown.get("text/plain").is_some_and(|text| text.contains("MPa")));
    let refused = context.execute("Stress::from_components(Components { nn: f64::NAN.mpa(), ee: sv, dd: sv, ne: 0.mpa(), nd: 0.mpa(), ed: 0.mpa() })?").expect("it goes on");
    assert!(refused.is_empty(), "an error shows no value");
}
