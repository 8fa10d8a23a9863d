"""The command line keeps its word.  usage: cli.py UNDERTONE-CLI"""
import csv
import io
import json
import os
import pathlib
import shutil
import subprocess
import sys
import tempfile

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
from tap import Tap, near, run, same  # noqa: E402

program = sys.argv[1]
examples = pathlib.Path(os.environ["UT_EXAMPLES"])
rooms = str(examples / "two-rooms.undertone")
clinic = str(examples / "clinic-one-channel.undertone")
tap = Tap()


def complaint(ran, code, *words):
    """A refusal: that code, nothing on standard output, one line a fault that begins with the program's name."""
    text = ran.stderr.decode()
    lines = text.splitlines()
    faults = same("exit", ran.returncode, code) + same("standard output", ran.stdout, b"")
    faults += [f"line {line!r}" for line in lines if not line.startswith("undertone-cli: ")] + ([] if lines else ["no complaint"])
    return faults + [f"{word!r} is missing in {text!r}" for word in words if word not in text]


# Wrong use.
for words, expected in (([], "no verb"), (["paint", rooms], "paint"), (["solve"], "arguments"), (["path", rooms, "C1"], "arguments"),
                        (["solve", rooms, rooms], "arguments"), (["solve", rooms, "--aim", "loudest"], "loudest"),
                        (["solve", rooms, "--direction", "sideways"], "sideways"), (["solve", rooms, "--format", "xml"], "xml"),
                        (["solve", rooms, "--hold", "much"], "much"), (["solve", rooms, "--hold", "-1"], "-1"), (["solve", rooms, "--hold", "1,5"], "1,5"),
                        (["solve", rooms, "--hold", "nan"], "nan"), (["solve", rooms, "--nonsense"], "nonsense"), (["check", rooms, "--aim", "as-set"], "aim"),
                        (["gains", rooms, "--direction", "up"], "direction"), (["path", rooms, "C1", "T1", "--format", "csv"], "csv"),
                        (["page", rooms], "output"), (["page", rooms, "--output", "sheet.doc"], "sheet.doc"),
                        (["page", rooms, "--output", "x.pdf", "--paper", "a5"], "a5"), (["channels", rooms, "--seed", "x"], "x"), (["channels", rooms, "--aim", "as-set"], "aim"),
                        (["channels", rooms, "--format", "csv"], "csv"), (["control", rooms, "--rule", "guess"], "guess"), (["control", rooms, "--step", "0"], "step"),
                        (["control", rooms, "--rounds", "-3"], "rounds"), (["control", rooms, "--delay", "1.5"], "delay"), (["control", rooms, "--hold", "1"], "hold"),
                        (["solve", rooms, "--seed", "1"], "seed"), (["path", rooms, "C9", "T1"], "C9"), (["path", rooms, "C1", "T9"], "T9")):
    tap.check(f"wrong use: {' '.join(words[0:1] + words[2:])}", complaint(run(program, *words), 2, expected))
for option in (["--help"], ["solve", "--help"], ["--version"], ["page", "--version"]):
    ran = run(program, *option)
    tap.check(f"{' '.join(option)} prints and ends well", same("exit", ran.returncode, 0) + same("errors", ran.stderr, b"") + ([] if ran.stdout else ["nothing"]))

# Plans that cannot be read.
for verb in (["check"], ["gains"], ["solve"], ["channels"], ["control"], ["path", "C1", "T1"], ["page", "--output", "never.pdf"]):
    words = [verb[0], "no-such-file.undertone", *verb[1:]]
    tap.check(f"{verb[0]}: a missing file", complaint(run(program, *words), 3, "no-such-file.undertone"))
    words[1] = "-"
    ran = run(program, *words, plan='{\n  "undertone": 1,\n  oops\n}\n')
    tap.check(f"{verb[0]}: what is not JSON", complaint(ran, 3, "-: line 3, column 3: "))
tap.check("no page is left of a plan that cannot be read", same("never.pdf", pathlib.Path("never.pdf").exists(), False))
broken = json.loads(pathlib.Path(rooms).read_text())
broken["cells"][0]["x_m"] = "left"
broken["cells"][1]["power_min_dbm"] = 99
del broken["terminals"][0]["y_m"]
ran = run(program, "check", "-", plan=broken)
tap.check("each fault is one line with its path", complaint(ran, 3, "-: cells[0].x_m: ", "-: cells[1]", "-: terminals[0]") + same("lines", len(ran.stderr.splitlines()), 3))
tap.check("a folder is no plan", complaint(run(program, "solve", str(examples)), 3))
tap.check("an empty input", complaint(run(program, "solve", "-", plan=""), 3, "line 1, column 1"))

# What is printed.
ran = run(program, "check", rooms)
tap.check("check says what it found", same("exit", ran.returncode, 0) + ([] if b"2 cells, 2 terminals" in ran.stdout else [ran.stdout]) + same("lines", len(ran.stdout.splitlines()), 1))
gains = json.loads(run(program, "gains", rooms, "--format", "json").stdout)
tap.check("gains as JSON", same("keys", list(gains), ["cells", "terminals", "gain_db"]) + same("cells", gains["cells"], ["C1", "C2"])
          + same("shape", [len(row) for row in gains["gain_db"]], [2, 2]))
rows = list(csv.reader(io.StringIO(run(program, "gains", rooms, "--format", "csv").stdout.decode())))
tap.check("gains as CSV are the same figures", same("header", rows[0], ["terminal", "C1", "C2"])
          + same("figures", [[float(x) for x in row[1:]] for row in rows[1:]], gains["gain_db"]))
path = json.loads(run(program, "path", rooms, "C2", "T1", "--format", "json").stdout)
total = (-path["base_loss_db"] - sum(w["loss_db"] for w in path["walls"] + path["floors"]) + path["cell_antenna_dbi"] + path["terminal_antenna_dbi"]
         - path["feeders_db"] - path["body_db"])
tap.check("a path adds up to the gain of the matrix", near("sum", total, path["gain_db"], 1e-9) + same("matrix", gains["gain_db"][0][1], path["gain_db"])
          + [f"{key} is missing" for key in ("cell", "terminal", "distance_m", "measured") if key not in path]
          + [f"{key} is missing in a wall" for wall in path["walls"] for key in ("storey", "wall", "construction", "incidence_deg", "loss_db") if key not in wall]
          + ([] if path["walls"] else ["no wall between the rooms"]))
for aim in ("least-power", "equal-margin", "as-set"):
    for direction in ("down", "up"):
        ran = run(program, "solve", clinic, "--format", "json", "--aim", aim, "--direction", direction)
        answer = json.loads(ran.stdout)
        tap.check(f"solve as JSON has every key: {aim} {direction}",
                  [f"{key} is missing" for key in ("title", "direction", "aim", "fallback", "verdict", "spectral_radius", "headroom_db", "transmitters", "links",
                                                   "limiting_group", "dropped", "warnings") if key not in answer]
                  + [f"{key} is missing in a link" for key in ("terminal", "cell", "power_dbm", "target_db", "level_target_dbm", "sinr_db", "margin_db", "signal_dbm",
                                                               "noise_dbm", "interference_dbm", "interferers", "reserve_db", "dropped") if key not in answer["links"][0]]
                  + [f"{key} is missing in a transmitter" for key in ("id", "power_dbm", "power_min_dbm", "power_max_dbm", "eirp_dbm") if key not in answer["transmitters"][0]]
                  + same("direction", answer["direction"], direction) + same("aim", answer["aim"], aim) + same("exit", ran.returncode, 1)
                  + ([] if all(word not in ran.stdout.lower() for word in (b"nan", b"inf,", b"-0.0,")) else ["a figure that is none"]))
answer = json.loads(run(program, "solve", rooms, "--format", "json").stdout)
rows = list(csv.DictReader(io.StringIO(run(program, "solve", rooms, "--format", "csv").stdout.decode())))
tap.check("solve as CSV gives the same figures", same("terminals", [row["terminal"] for row in rows], [link["terminal"] for link in answer["links"]])
          + [f for row, link in zip(rows, answer["links"]) for key in ("power_dbm", "sinr_db", "margin_db") for f in same(key, float(row[key]), link[key])])
text = run(program, "solve", rooms).stdout.decode()
tap.check("solve as text gives the same figures, rounded",
          [f"{figure} is missing" for link in answer["links"] for figure in (f"{link['sinr_db']:.2f}", f"{link['power_dbm']:.2f}") if figure not in text]
          + ([] if f"{answer['headroom_db']:.2f} dB" in text else ["no headroom"]) + ([] if "-0.0 " not in text and "-0.00" not in text else ["a minus nothing"]))
ran = run(program, "solve", "-", "--format", "json", plan=pathlib.Path(rooms).read_bytes())
tap.check("standard input gives what the file gives", same("answer", json.loads(ran.stdout), answer))
loud = json.loads(pathlib.Path(rooms).read_text())
loud["cells"][0]["power_dbm"] = 30
ran = run(program, "solve", "-", "--format", "json", plan=loud)
tap.check("warnings go to standard error and into the answer",
          [f"line {line!r}" for line in ran.stderr.decode().splitlines() if not line.startswith("undertone-cli: warning: ")]
          + same("as many", len(ran.stderr.splitlines()), len(json.loads(ran.stdout)["warnings"])) + ([] if ran.stderr else ["no warning"]))

# Pages.
with tempfile.TemporaryDirectory() as folder:
    for ending, begins in (("pdf", b"%PDF"), ("svg", b"<?xml"), ("png", b"\x89PNG"), ("PDF", b"%PDF")):
        target = pathlib.Path(folder) / f"sheet.{ending}"
        ran = run(program, "page", rooms, "--output", str(target), "--paper", "a3", "--orientation", "portrait")
        tap.check(f"page as {ending}", same("exit", ran.returncode, 0) + same("begins", target.read_bytes()[:len(begins)], begins) + same("prints", ran.stdout, b""))
    ran = run(program, "page", rooms, "--output", str(pathlib.Path(folder) / "none" / "sheet.pdf"))
    tap.check("a page that cannot be written", complaint(ran, 4, "sheet.pdf"))
    ran = run(program, "page", clinic, "--output", str(pathlib.Path(folder) / "clinic.pdf"))
    tap.check("page ends well though not all is met", same("exit", ran.returncode, 0))
with open("/dev/full", "wb") as full:
    ran = subprocess.run([program, "solve", rooms], stdout=full, stderr=subprocess.PIPE)
    tap.check("standard output that is full", same("exit", ran.returncode, 4) + ([] if ran.stderr.startswith(b"undertone-cli: ") else [ran.stderr]))

# A comma locale, made here, changes no byte.
with tempfile.TemporaryDirectory() as folder:
    made = subprocess.run(["localedef", "-i", "de_DE", "-f", "UTF-8", f"{folder}/de_DE.UTF-8"], capture_output=True) if shutil.which("localedef") else None
    env = os.environ | {"LOCPATH": folder, "LC_ALL": "de_DE.UTF-8", "LANGUAGE": "de"}
    point = subprocess.run(["locale", "-k", "decimal_point"], env=env, capture_output=True, text=True).stdout.strip()
    tap.check("the comma locale is one", same("decimal point", point, 'decimal_point=","'))
    for words in (["solve", rooms, "--format", "json"], ["solve", rooms, "--format", "csv"], ["solve", rooms], ["gains", rooms, "--format", "csv"],
                  ["path", rooms, "C1", "T2", "--format", "json"], ["path", rooms, "C1", "T2"], ["check", rooms], ["solve", rooms, "--hold", "0.5"]):
        ran = run(program, *words, env=env)
        tap.check(f"comma locale: {words[0]} {' '.join(words[2:])}", same("bytes", ran.stdout, run(program, *words).stdout) + ([] if ran.stdout else [ran.stderr]))
    for name in ("plain.svg", "comma.svg"):
        run(program, "page", rooms, "--output", f"{folder}/{name}", env=env if name == "comma.svg" else None)
    tap.check("comma locale: page", same("bytes", pathlib.Path(f"{folder}/comma.svg").read_bytes() == pathlib.Path(f"{folder}/plain.svg").read_bytes(), True))

ran = subprocess.run(["man", "--warnings", "-E", "UTF-8", "-l", "-Tutf8", "-Z", str(examples.parents[1] / "docs" / "undertone-cli.1")], capture_output=True,
                     env=os.environ | {"MANROFFSEQ": ""})
tap.check("the manual page formats without a warning", same("exit", ran.returncode, 0) + same("warnings", ran.stderr, b""))
tap.end()
