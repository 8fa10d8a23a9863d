"""The examples of docs/command-line.md are what the program prints.  usage: docs.py UNDERTONE-CLI COMMAND-LINE.MD EXAMPLES [--write]

An indented block whose first line begins with "$ undertone-cli" is run in the examples' folder; a line of "…" stands for any number of lines.
--write puts the present output into the file, but for blocks with such a line.
"""
import pathlib
import re
import shlex
import subprocess
import sys
import tempfile

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
from tap import Tap  # noqa: E402

program, document, examples = str(pathlib.Path(sys.argv[1]).resolve()), pathlib.Path(sys.argv[2]), pathlib.Path(sys.argv[3])
tap = Tap()


def output_of(command):
    with tempfile.TemporaryDirectory() as folder:
        for plan in examples.glob("*.undertone"):
            (pathlib.Path(folder) / plan.name).write_bytes(plan.read_bytes())
        ran = subprocess.run([program, *shlex.split(command)[2:]], cwd=folder, capture_output=True, text=True)
    return (ran.stderr + ran.stdout).rstrip("\n").split("\n")


NUMBER = re.compile(r"-?\d+\.?\d*(?:e-?\d+)?")


def alike(one, other):
    """The same but for the last digits of long numbers, which libraries and processors may differ in."""
    if NUMBER.split(one.rstrip()) != NUMBER.split(other.rstrip()):
        return False
    return all(a == b or (len(a) > 9 and abs(float(a) - float(b)) < 1e-9 * max(1, abs(float(a)))) for a, b in zip(NUMBER.findall(one), NUMBER.findall(other)))


def fits(shown, printed):
    """Whether the lines shown, with "…" for any number, are what was printed."""
    if not shown:
        return not printed
    if shown[0].strip() == "…":
        return any(fits(shown[1:], printed[k:]) for k in range(len(printed) + 1))
    return bool(printed) and alike(shown[0], printed[0]) and fits(shown[1:], printed[1:])


lines, out, faults, k = document.read_text().split("\n"), [], [], 0
commands = 0
while k < len(lines):
    if not lines[k].startswith("    $ undertone-cli"):
        out.append(lines[k])
        k += 1
        continue
    end = k + 1
    while end < len(lines) and (lines[end].startswith("    ") or (lines[end] == "" and end + 1 < len(lines) and lines[end + 1].startswith("    ")
                                                                        and not lines[end + 1].startswith("    $"))):
        end += 1
    command, shown = lines[k].strip(), [line[4:] for line in lines[k + 1:end]]
    printed = output_of(command)
    commands += 1
    if any(line.strip() == "…" for line in shown):
        new = shown
    else:
        new = printed
    if not fits(shown, printed):
        faults.append(f"{command}\nprints:\n" + "\n".join(printed))
    out.append(lines[k])
    out += [("    " + line).rstrip() for line in new]
    k = end
if sys.argv[4:] == ["--write"]:
    document.write_text("\n".join(out))
tap.check(f"the {commands} examples are what the program prints", faults + ([] if commands > 5 else ["too few"]))
tap.end()
