"""A few lines for tests that run undertone-cli: running it, and reporting in TAP."""
import json
import os
import subprocess
import sys


# Sanitized programs are slow: random trials are fewer there.
SHARE = int(os.environ.get("UT_TRIALS_SHARE", "1"))


def trials(first, end=None):
    """range (), or its first part where trials are to be fewer."""
    first, end = (0, first) if end is None else (first, end)
    return range(first, first + (end - first + SHARE - 1) // SHARE)


def enough(count, wanted):
    """[] or one fault; of fewer trials, half of their part will do."""
    least = wanted if SHARE == 1 else wanted // (2 * SHARE)
    return [] if count >= least else [f"{count} cases, expected {least} at least"]


class Tap:
    def __init__(self):
        self.done = self.bad = 0
        self.out = os.fdopen(int(os.environ["UT_REPORT_FD"]), "w") if "UT_REPORT_FD" in os.environ else sys.stdout

    def check(self, what, faults):
        """One test case: it passes when the list of faults is empty."""
        faults = list(faults)
        self.done += 1
        self.bad += bool(faults)
        print(f"{'not ok' if faults else 'ok'} {self.done} - {what}", file=self.out, flush=True)
        for fault in faults:
            for line in str(fault).splitlines() or [""]:
                print(f"# {line}", file=self.out)

    def end(self):
        print(f"1..{self.done}", file=self.out, flush=True)
        sys.exit(1 if self.bad or not self.done else 0)


def run(program, *arguments, plan=None, env=None):
    """Runs the program; a plan (object, text or bytes) goes to its standard input."""
    data = plan if isinstance(plan, bytes) else (plan if isinstance(plan, str) else json.dumps(plan)).encode()
    return subprocess.run([program, *arguments], input=data if plan is not None else b"", capture_output=True, env=env)


def solve(program, plan, *options):
    """The answer to a plan as an object, or an exception that holds what was complained."""
    ran = run(program, "solve", "-", "--format", "json", *options, plan=plan)
    if ran.returncode not in (0, 1):
        raise RuntimeError(f"exit {ran.returncode}: {ran.stderr.decode()}")
    answer = json.loads(ran.stdout)
    answer["exit"] = ran.returncode
    return answer


def near(name, got, expected, tolerance):
    """[] or one fault."""
    if got is None or abs(got - expected) > tolerance:
        return [f"{name}: {got}, expected {expected} within {tolerance}"]
    return []


def same(name, got, expected):
    return [] if got == expected else [f"{name}: {got!r}, expected {expected!r}"]
