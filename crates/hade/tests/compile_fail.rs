//! Mistakes that the compiler must catch, each with a message a user can act on.

#[test]
fn mistakes_do_not_compile_and_say_why() {
    trybuild::TestCases::new().compile_fail("tests/compile_fail/*.rs");
}
