"""The general tests of Jupyter kernels, with samples in Rust. Fails if one of them is skipped."""

import sys
import unittest

import jupyter_kernel_test

SHOWN = 'println!("EVCXR_BEGIN_CONTENT {}\\n{}\\nEVCXR_END_CONTENT", "text/html", "<b>two</b>");'


class HadeKernelTests(jupyter_kernel_test.KernelTests):
    kernel_name = "hade"
    language_name = "rust"
    file_extension = ".rs"

    code_hello_world = 'println!("hello, world");'
    code_stderr = 'eprintln!("hello, error");'
    code_generate_error = '"x".parse::<i32>()?'
    code_execute_result = [
        {"code": "std::num::Wrapping(6 * 7)", "result": "42"},
        {"code": '"text".to_string()', "result": '"text"'},
        {"code": "std::num::Wrapping(6 * 8)", "result": "48"},
        {"code": "std::num::Wrapping(6 * 7)", "result": "42"},
    ]
    code_display_data = [
        {"code": SHOWN, "mime": "text/html"},
        {"code": "Attitude { inclination: 42.deg(), azimuth: Azimuth::from_true_north(120.deg()) }.chain()?", "mime": "text/html"},
    ]
    completion_samples = [
        {"text": "Stress::from_horiz", "matches": {"from_horizontals(given)"}},
        {"text": "let p = 68.5.mpa(); p.in_mp", "matches": {"in_mpa()"}},
        {"text": "no_such_name_any"},
    ]
    complete_code_samples = ["let a = 1;", "1 + 1", "fn f() {\n    1;\n}", ":dep x"]
    incomplete_code_samples = ["fn f() {", "let v = vec![1,", 'let s = "one', "/* one", "let a ="]
    invalid_code_samples = ["}", "let = 1;", "(1, 2]"]
    code_inspect_sample = "Attitude"
    code_history_pattern = "std::num::Wrapping(?*7)"
    supported_history_operations = ("tail", "range", "search")


# What a notebook in Rust does not have.
NOT_APPLICABLE = {"test_clear_output", "test_pager"}

if __name__ == "__main__":
    suite = unittest.defaultTestLoader.loadTestsFromTestCase(HadeKernelTests)
    result = unittest.TextTestRunner(verbosity=2).run(suite)
    skipped = {test.id().rsplit(".", 1)[1] for test, _ in result.skipped if hasattr(test, "_testMethodName")}
    print("skipped:", [(test.id(), why) for test, why in result.skipped])
    assert result.testsRun == 12, f"{result.testsRun} tests are there"
    assert len(result.skipped) == len(NOT_APPLICABLE) and skipped == NOT_APPLICABLE, skipped
    sys.exit(not result.wasSuccessful())
