//! One test a case of `tests/clients/life.py`.

use crate::environment::Jupyter;

macro_rules! cases {
    ($($name:ident)*) => {
        $(#[test]
        fn $name() {
            if let Some(jupyter) = Jupyter::new() {
                jupyter.run("life.py", &[stringify!($name)]);
            }
        })*

        /// A case that is not listed here would never run.
        #[test]
        fn every_case_is_listed() {
            let script = std::fs::read_to_string(hade_tests::root().join("tests/clients/life.py")).expect("the script");
            let helpers = ["session_folders", "gone", "until"];
            let cases: Vec<&str> = script
                .lines()
                .filter_map(|line| line.strip_prefix("def ")?.split('(').next())
                .filter(|name| !helpers.contains(name))
                .collect();
            let mut listed = vec![$(stringify!($name)),*];
            let mut found = cases.clone();
            listed.sort_unstable();
            found.sort_unstable();
            assert_eq!(listed, found);
        }
    };
}

cases! {
    outputs_come_while_the_cell_runs
    much_text_comes_in_few_messages
    a_display_is_replaced_by_its_name
    long_work_shows_how_far_it_is
    every_failure_has_its_name
    cells_behind_a_failure_are_aborted
    cells_are_counted_unless_they_are_silent
    questions_are_answered_while_a_cell_runs
    an_endless_loop_is_interrupted
    two_kernels_do_not_meet
    nothing_stays_behind
    a_cell_that_waits_for_the_libraries_is_told
    without_a_compiler_a_cell_says_what_to_do
    a_restart_begins_anew
    a_kernel_ends_with_its_client
    strangers_are_not_heard
    writing_is_helped
    a_comm_is_closed_at_once
}
