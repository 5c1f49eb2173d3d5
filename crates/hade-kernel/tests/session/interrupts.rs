//! Stopping a cell.

use std::thread;
use std::time::{Duration, Instant};

use hade_kernel::{CellOutcome, InterruptHandle, Session, SessionOptions, Stream};

use crate::{Bench, Test};

pub(crate) const TESTS: &[(&str, Test)] = &[
    ("a_long_loop_of_the_library_stops_at_once", a_long_loop_of_the_library_stops_at_once),
    ("a_loop_of_the_cell_that_asks_stops_at_once", a_loop_of_the_cell_that_asks_stops_at_once),
    ("a_cell_that_does_not_listen_is_ended", a_cell_that_does_not_listen_is_ended),
    ("a_cell_that_is_compiled_stops", a_cell_that_is_compiled_stops),
    ("a_crate_that_is_built_stops", a_crate_that_is_built_stops),
    ("an_interrupt_never_hits_the_next_cell", an_interrupt_never_hits_the_next_cell),
    ("a_cell_whose_time_is_over_keeps_the_variables", a_cell_whose_time_is_over_keeps_the_variables),
    ("a_cell_that_ends_by_itself_is_not_silent", a_cell_that_ends_by_itself_is_not_silent),
];

/// A cell that is asked stops within 0.2 s; on a machine that does much else it may take a little longer.
const SOON: Duration = Duration::from_millis(500);

fn session(bench: &Bench) -> (Session, InterruptHandle) {
    let interrupt = InterruptHandle::default();
    let options = SessionOptions { interrupt: interrupt.clone(), ..SessionOptions::default() };
    let mut session = bench.start(options);
    assert_eq!(session.execute("let kept = 7;").error, None);
    (session, interrupt)
}

/// Runs a cell and interrupts it so long after its beginning; the outcome, and how long it went on.
fn interrupted(
    session: &mut Session,
    handle: &InterruptHandle,
    cell: &str,
    after: Duration,
) -> (CellOutcome, Duration) {
    let handle = handle.clone();
    let stopper = thread::spawn(move || {
        thread::sleep(after);
        handle.interrupt();
        Instant::now()
    });
    let outcome = session.execute(cell);
    let ended = Instant::now();
    let asked = stopper.join().expect("the interrupt is sent");
    (outcome, ended.saturating_duration_since(asked))
}

fn assert_kept(session: &mut Session) {
    let outcome = session.execute("println!(\"{kept}\");");
    assert_eq!((outcome.error.as_ref(), outcome.text(Stream::Stdout).as_str()), (None, "7\n"));
}

fn a_long_loop_of_the_library_stops_at_once(bench: &mut Bench) {
    let (mut session, handle) = session(bench);
    let setup = "let inputs = MapInputs {\n\
         stress: Stress::from_components(Components { nn: 50.mpa(), ee: 42.mpa(), dd: 60.mpa(), ne: 3.mpa(), nd: (-4).mpa(), ed: 5.mpa() })?,\n\
         pore: 20.mpa(), step: 0.1.deg(),\n\
         rock: Rock { poisson: 0.25, tensile_strength: 2.mpa(), strength: Strength::modified_lade(10.mpa(), 30.deg()) } };";
    assert_eq!(session.execute(setup).error, None);
    let cell = "println!(\"begun\");\nfor _ in 0..1000 { DirectionMap::over(inputs)?; }";
    let (outcome, late) = interrupted(&mut session, &handle, cell, Duration::from_secs(3));
    println!("a map over directions stopped after {:.3} s", late.as_secs_f64());
    let error = outcome.error.clone().expect("an error");
    assert_eq!(error.name, "Interrupted", "{}", error.detail);
    assert_eq!(error.sentence, "the cell was interrupted: variables of earlier cells are kept");
    assert_eq!(outcome.text(Stream::Stdout), "begun\n");
    assert_eq!(outcome.text(Stream::Stderr), "");
    assert!(late < SOON, "{late:?}");
    assert_kept(&mut session);
    // The next long work is not stopped by the last request.
    let outcome = session.execute("let map = DirectionMap::over(MapInputs { step: 5.deg(), ..inputs })?;");
    assert_eq!(outcome.error, None);
    // Walls, too.
    let walls = "let wall = Wall::new(WallInputs { stress: Attitude { inclination: 30.deg(), azimuth: Azimuth::from_true_north(60.deg()) }.chain()?.carry(&inputs.stress), pore: inputs.pore, rock: inputs.rock })?;\n\
                 loop { std::hint::black_box(wall.limits()); }";
    let (outcome, late) = interrupted(&mut session, &handle, walls, Duration::from_secs(3));
    println!("a search over walls stopped after {:.3} s", late.as_secs_f64());
    assert_eq!(outcome.error.map(|error| error.name).as_deref(), Some("Interrupted"));
    assert!(late < SOON, "{late:?}");
    assert_kept(&mut session);
}

fn a_loop_of_the_cell_that_asks_stops_at_once(bench: &mut Bench) {
    let (mut session, handle) = session(bench);
    let cell = "let mut n = 0u64;\neprintln!(\"half\");\nloop { n += 1; hade::interrupt::check(); }";
    let (outcome, late) = interrupted(&mut session, &handle, cell, Duration::from_secs(3));
    println!("a loop of the cell stopped after {:.3} s", late.as_secs_f64());
    assert_eq!(outcome.error.as_ref().map(|error| error.name.as_str()), Some("Interrupted"));
    assert_eq!(outcome.text(Stream::Stderr), "half\n");
    assert!(late < SOON, "{late:?}");
    assert_kept(&mut session);
}

fn a_cell_that_does_not_listen_is_ended(bench: &mut Bench) {
    let (mut session, handle) = session(bench);
    let cell = "println!(\"begun\");\nstd::thread::sleep(std::time::Duration::from_secs(60));";
    let (outcome, late) = interrupted(&mut session, &handle, cell, Duration::from_secs(3));
    println!("a cell that does not listen was ended after {:.3} s", late.as_secs_f64());
    let error = outcome.error.clone().expect("an error");
    assert_eq!(error.name, "Interrupted", "{}", error.detail);
    assert!(error.sentence.contains("did not stop when it was asked"), "{}", error.sentence);
    assert!(error.detail.contains("All variables are lost: kept.") && error.detail.contains("Run cell 1 again."));
    assert_eq!(outcome.text(Stream::Stdout), "begun\n");
    assert!(late > Duration::from_millis(1400) && late < Duration::from_millis(2500), "{late:?}");
    let error = session.execute("kept").error.expect("an error");
    assert_eq!(error.sentence, "`kept` was lost when cell 2 was stopped; run cell 1 again");
    assert_eq!(session.execute("1 + 1").error, None);
}

/// Takes the compiler many seconds, and no time to run.
fn slow_to_compile() -> String {
    let mut cell = String::new();
    for k in 0..400 {
        cell.push_str(&format!(
            "fn f{k}(x: f64) -> f64 {{ let v: Vec<f64> = (0..9).map(|i| x * i as f64).filter(|y| *y > {k}.0).collect(); \
             let s: String = v.iter().map(|y| format!(\"{{y:?}}\")).collect::<Vec<_>>().join(\",\"); s.len() as f64 }}\n"
        ));
    }
    cell.push_str("let sum = 0.0");
    for k in 0..400 {
        cell.push_str(&format!(" + f{k}(2.0)"));
    }
    cell + ";"
}

fn a_cell_that_is_compiled_stops(bench: &mut Bench) {
    let (mut session, handle) = session(bench);
    let cell = slow_to_compile();
    for after in [100, 600, 1500] {
        let (outcome, late) = interrupted(&mut session, &handle, &cell, Duration::from_millis(after));
        println!("a cell being compiled, asked after {after} ms, stopped after {:.3} s", late.as_secs_f64());
        let error = outcome.error.clone().expect("an error");
        assert_eq!(error.name, "Interrupted", "{}", error.detail);
        assert!(error.sentence.contains("nothing of it ran"), "{}", error.sentence);
        assert_kept(&mut session);
    }
}

fn a_crate_that_is_built_stops(bench: &mut Bench) {
    let (mut session, handle) = session(bench);
    let folder = tempfile::tempdir().expect("a folder");
    std::fs::create_dir(folder.path().join("src")).expect("a folder");
    let write = |name: &str, text: &str| std::fs::write(folder.path().join(name), text).expect("a file");
    write("Cargo.toml", "[package]\nname = \"slow\"\nversion = \"0.1.0\"\nedition = \"2024\"\n");
    write("build.rs", "fn main() { std::thread::sleep(std::time::Duration::from_secs(60)); }");
    write("src/lib.rs", "");
    let cell = format!(":dep slow = {{ path = {:?} }}", folder.path());
    let (outcome, late) = interrupted(&mut session, &handle, &cell, Duration::from_secs(4));
    println!("a crate being built stopped after {:.3} s", late.as_secs_f64());
    let error = outcome.error.clone().expect("an error");
    assert_eq!(error.name, "Interrupted", "{}", error.detail);
    assert!(late < Duration::from_secs(2), "{late:?}");
    assert_kept(&mut session);
}

fn an_interrupt_never_hits_the_next_cell(bench: &mut Bench) {
    let (mut session, handle) = session(bench);
    handle.interrupt();
    assert_kept(&mut session);
    // Asked as the cell ends, at every moment there may be.
    for late in 0..4 {
        let cell = "std::thread::sleep(std::time::Duration::from_millis(400));";
        let asked = Duration::from_millis(500 + 80 * late);
        let _ = interrupted(&mut session, &handle, cell, asked);
        let outcome = session.execute("std::thread::sleep(std::time::Duration::from_millis(1800));");
        assert_eq!(outcome.error, None);
        assert_kept(&mut session);
    }
}

fn a_cell_whose_time_is_over_keeps_the_variables(bench: &mut Bench) {
    let options = SessionOptions { cell_timeout: Some(Duration::from_secs(6)), ..SessionOptions::default() };
    let mut session = bench.start(options);
    assert_eq!(session.execute("let kept = 7;").error, None);
    let started = Instant::now();
    let error = session.execute("loop { hade::interrupt::check(); }").error.expect("an error");
    assert_eq!(error.name, "Timeout");
    assert!(error.sentence.starts_with("the cell was stopped after 6 s: variables of earlier cells are kept"));
    assert!(started.elapsed() < Duration::from_millis(6300), "{:?}", started.elapsed());
    assert_kept(&mut session);
}

fn a_cell_that_ends_by_itself_is_not_silent(bench: &mut Bench) {
    let (mut session, handle) = session(bench);
    let cell = "std::thread::sleep(std::time::Duration::from_millis(3000));\nlet whole = 8;";
    let (outcome, _) = interrupted(&mut session, &handle, cell, Duration::from_millis(2900));
    let error = outcome.error.expect("a notebook that runs all cells stops here");
    assert!(error.sentence.contains("what it defines is kept"), "{}", error.sentence);
    assert_eq!(session.variables(), ["kept", "whole"]);
}
