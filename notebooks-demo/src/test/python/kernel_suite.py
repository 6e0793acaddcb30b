"""The reference test suite for kernels, with snippets of ours. KernelSuiteTest runs it:

    python kernel_suite.py

It ends with status 1 if a test fails, is skipped, or is not there. JUPYTER_PATH leads to the kernelspec.
"""

import sys
import unittest

import jupyter_kernel_test

NAME = "countwright"
# All tests of jupyter_kernel_test 0.7.0; fewer would mean that some were not found.
EXPECTED = 13


class CountwrightSuite(jupyter_kernel_test.KernelTests):
    kernel_name = NAME
    language_name = "java"
    file_extension = ".java"
    code_hello_world = 'System.out.println("hello, world");'
    code_stderr = 'System.err.println("door 7 is stuck");'
    completion_samples = [
        {"text": "Table.rea", "matches": {"read("}},
        {"text": "1 + Integer.MAX_V", "matches": {"MAX_VALUE"}},
    ]
    complete_code_samples = ["1", "int x = 1;", "for (int i = 0; i < 3; i++) {}", "record Depot(String name) {}"]
    incomplete_code_samples = ["for (int i = 0; i < 3; i++) {", "int f(", '"""\nfaults']
    invalid_code_samples = ["foo(]", "int 7x = )"]
    code_page_something = 'page("a long table")'
    code_generate_error = 'throw new IllegalStateException("no exposure");'
    code_execute_result = [
        {"code": "1 + 2 * 3", "result": "7"},
        {"code": '"Har" + "bour"', "result": "Harbour"},
        {"code": "List.of(4, 5)"},
        {"code": 'Table.of(numbers("faults", 3, 5))', "mime": "text/html"},
    ]
    code_display_data = [
        {"code": 'show("text")', "mime": "text/plain"},
        {"code": 'show(Table.of(numbers("faults", 3, 5)))', "mime": "text/html"},
        {
            "code": 'show(Charts.rates(Table.of(texts("depot", "A", "B"), numbers("n", 3, 5),'
            ' numbers("km", 10, 9)), "n", "km", "depot"))',
            "mime": "image/png",
        },
    ]
    code_history_pattern = "1?+*"
    supported_history_operations = ("tail", "range", "search")
    code_inspect_sample = "Table"
    code_clear_output = "clear()"


class CountwrightWelcome(jupyter_kernel_test.IopubWelcomeTests):
    kernel_name = NAME
    support_iopub_welcome = True


def main():
    loader = unittest.defaultTestLoader
    suite = unittest.TestSuite(loader.loadTestsFromTestCase(each) for each in (CountwrightSuite, CountwrightWelcome))
    result = unittest.TextTestRunner(stream=sys.stdout, verbosity=2).run(suite)
    if result.skipped:
        print(f"skipped, which counts as failed: {result.skipped}")
    if result.testsRun != EXPECTED:
        print(f"expected {EXPECTED} tests, but {result.testsRun} ran")
    good = result.wasSuccessful() and not result.skipped and result.testsRun == EXPECTED
    sys.exit(0 if good else 1)


if __name__ == "__main__":
    main()
