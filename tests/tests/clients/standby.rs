//! One test a case of `tests/clients/standby.py`.

use hade_tests::hade_binary;

use crate::environment::Jupyter;

fn case(name: &str) {
    let Some(jupyter) = Jupyter::with_standby() else { return };
    let output = jupyter.run("standby.py", &[name, &hade_binary().display().to_string()]);
    print!("{}", String::from_utf8_lossy(&output.stdout));
}

#[test]
fn a_kernel_is_taken_over() {
    case("a_kernel_is_taken_over");
}

#[test]
fn a_kernel_ends_with_its_own_process() {
    case("a_kernel_ends_with_its_own_process");
}

#[test]
fn a_restart_finds_its_ports() {
    case("a_restart_finds_its_ports");
}

#[test]
fn without_one_the_kernel_serves_itself() {
    case("without_one_the_kernel_serves_itself");
}

#[test]
fn nobody_comes() {
    case("nobody_comes");
}

#[test]
fn one_is_enough() {
    case("one_is_enough");
}
