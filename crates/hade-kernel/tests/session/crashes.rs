//! What is said when the process that runs the cells goes.

use crate::{Bench, Test};

pub(crate) const TESTS: &[(&str, Test)] = &[
    ("what_a_crash_lost_is_named_with_the_cells_to_run_again", what_a_crash_lost_is_named_with_the_cells_to_run_again),
    ("want_of_memory_is_explained", want_of_memory_is_explained),
    ("a_process_killed_from_outside_is_explained", a_process_killed_from_outside_is_explained),
    ("a_process_killed_between_cells_is_explained", a_process_killed_between_cells_is_explained),
    ("a_program_left_running_does_not_hold_the_session", a_program_left_running_does_not_hold_the_session),
];

fn what_a_crash_lost_is_named_with_the_cells_to_run_again(bench: &mut Bench) {
    bench.session = None;
    bench.ok("let one = 1;");
    bench.ok("fn kept() -> i32 { 4 }\nlet mut list = vec![one];");
    bench.ok("println!(\"nothing defined here\");");
    bench.ok("list.push(2);");
    let error = bench.failure("let never = 3;\nstd::process::exit(3)");
    assert!(error.detail.contains("All variables are lost: list, one."), "{}", error.detail);
    assert!(error.detail.contains("Run cells 1, 2 and 4 again."), "{}", error.detail);
    let error = bench.failure("list.len()");
    assert_eq!(error.sentence, "`list` was lost when cell 5 crashed; run cells 1, 2 and 4 again");
    let error = bench.failure("never");
    assert!(error.sentence.starts_with("cell 5, which defines `never`"), "{}", error.sentence);
    bench.ok("let one = kept();");
    assert_eq!(bench.value("one"), "4");
}

fn want_of_memory_is_explained(bench: &mut Bench) {
    let error = bench.failure("let room: Vec<u8> = Vec::with_capacity(1 << 46);\nprintln!(\"{}\", room.capacity());");
    assert_eq!(error.name, "ProcessDied");
    assert!(error.sentence.starts_with("the cell asked for 70369 GB of memory at once"), "{}", error.detail);
    assert_eq!(bench.value("8"), "8");
}

fn a_process_killed_from_outside_is_explained(bench: &mut Bench) {
    bench.ok("let before = 1;");
    let error = bench.failure(
        "std::process::Command::new(\"kill\").args([\"-9\", &std::process::id().to_string()]).status()?;\n\
         std::thread::sleep(std::time::Duration::from_secs(5));",
    );
    assert_eq!(error.name, "ProcessDied");
    assert!(error.sentence.contains("was killed"), "{}", error.sentence);
    assert!(error.detail.contains("before"), "{}", error.detail);
    assert_eq!(bench.value("9"), "9");
}

fn a_process_killed_between_cells_is_explained(bench: &mut Bench) {
    bench.ok("let id = std::process::id().to_string();\n\
         std::process::Command::new(\"sh\").args([\"-c\", &format!(\"sleep 0.2; kill -9 {id}\")]).spawn()?;");
    std::thread::sleep(std::time::Duration::from_millis(600));
    let error = bench.failure("id.len()");
    assert_eq!(error.name, "ProcessDied");
    assert!(error.detail.contains("All variables are lost"), "{}", error.detail);
    assert_eq!(bench.value("10"), "10");
}

fn a_program_left_running_does_not_hold_the_session(bench: &mut Bench) {
    let started = std::time::Instant::now();
    // It holds the output of the cells open for much longer than the cells live.
    bench.failure("std::process::Command::new(\"sleep\").arg(\"30\").spawn()?;\nstd::process::exit(4)");
    assert_eq!(bench.value("11"), "11");
    assert!(started.elapsed().as_secs() < 10, "{:?}", started.elapsed());
}
