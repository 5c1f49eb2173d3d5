use crate::environment::Jupyter;

#[test]
fn the_general_tests_of_kernels_pass() {
    if let Some(jupyter) = Jupyter::new() {
        jupyter.run("protocol.py", &[]);
    }
}
