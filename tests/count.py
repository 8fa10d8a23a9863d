"""Adds up the test cases of finished test runs: count.py BUILD_FOLDER...  The last line reads "N passed, N failed"."""
import sys
import xml.etree.ElementTree as tree

passed = failed = 0
for folder in sys.argv[1:]:
    for suite in tree.parse(f"{folder}/meson-logs/testlog.junit.xml").getroot().iter("testsuite"):
        cases = suite.findall("testcase")
        bad = sum(1 for case in cases if case.find("failure") is not None or case.find("error") is not None)
        if not cases or (bad == 0 and int(suite.get("errors", 0)) + int(suite.get("failures", 0)) > 0):
            bad += 1  # a program that failed without naming a case
        failed += bad
        passed += sum(1 for case in cases if len(case) == 0 or case.find("system-out") is not None) if not bad else len(cases) - bad
for folder in sys.argv[1:] if failed else []:
    # What the failing cases said; the test runner shows the rest.
    telling = False
    for line in open(f"{folder}/meson-logs/testlog.txt", errors="replace"):
        telling = line.startswith("not ok") or (telling and line.startswith("#"))
        if telling:
            print(f"{folder}: {line.rstrip()[:400]}")
print(f"{passed} passed, {failed} failed")
sys.exit(1 if failed or not passed else 0)
