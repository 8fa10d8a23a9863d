"""What must hold of every answer, and answers about odd plans: finite or null, never a crash or a noise.  usage: properties.py UNDERTONE-CLI"""
import copy
import itertools
import json
import pathlib
import random
import sys

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent))
from oracle import random_plan  # noqa: E402
from tap import Tap, enough, run, same, solve, trials  # noqa: E402

program = sys.argv[1]
tap = Tap()


def value(db):
    return float("-inf") if db is None else db


# A link less never lowers the headroom, unless its cell falls idle in the simultaneous downlink and so sends more than before.
faults, compared = [], 0
for seed in trials(160):
    plan, direction = random_plan(seed)
    answer = solve(program, plan, "--direction", direction)
    if len(answer["links"]) < 2 or any(link["cell"] is None for link in answer["links"]):
        continue
    gone = random.Random(seed).choice(answer["links"])
    if seed & 3 == 1 and [link["cell"] for link in answer["links"]].count(gone["cell"]) == 1:
        continue
    fewer = copy.deepcopy(plan)
    next(t for t in fewer["terminals"] if t["id"] == gone["terminal"])["on"] = False
    compared += 1
    rest = solve(program, fewer, "--direction", direction)
    if rest["links"] and value(rest["headroom_db"]) < value(answer["headroom_db"]) - 1e-8:
        faults.append(f"plan {seed}: {answer['headroom_db']} with {gone['terminal']}, {rest['headroom_db']} without")
tap.check(f"a link less never lowers the headroom ({compared} plans)", faults + enough(compared, 80))

# Powers on steps are never below the continuous ones.
faults, compared = [], 0
for seed in trials(160):
    plan, direction = random_plan(seed)
    if seed & 3 == 1:
        continue
    stepped = copy.deepcopy(plan)
    for radio in stepped["cells"] + stepped["terminals"]:
        radio["power_step_db"] = 1.5
    one, other = solve(program, plan, "--direction", direction), solve(program, stepped, "--direction", direction)
    faults += same(f"plan {seed} headroom", other["headroom_db"], one["headroom_db"])
    if one["verdict"] != "met" or other["verdict"] != "met":
        faults += [f"plan {seed}: {one['verdict']}, on steps {other['verdict']}"] if other["verdict"] == "met" else []
        continue
    compared += 1
    faults += [f"plan {seed}: {a['id']} at {b['power_dbm']} on steps, {a['power_dbm']} without"
               for a, b in zip(one["transmitters"], other["transmitters"]) if b["power_dbm"] < a["power_dbm"] - 1e-8]
tap.check(f"powers on steps are never below the continuous ones ({compared} plans)", faults + enough(compared, 25))

# The best balanced SIR without limits and noise is the same for a system and its transpose (Zander, IEEE Trans. Veh. Technol. 41(1), 1992, from memory):
# both directions of one-terminal cells, all at once, have the same spectral radius.
faults = []
for seed in trials(60):
    rng = random.Random(seed)
    n = rng.randint(2, 8)
    radio = {"storey": "S1", "x_m": 0, "y_m": 0, "height_m": 1, "power_dbm": 0, "power_min_dbm": -390, "power_max_dbm": 300, "power_step_db": 0}
    plan = {
        "undertone": 1, "carrier": {"frequency_mhz": 1000, "bandwidth_mhz": 20, "sharing": "simultaneous"}, "propagation": {"base": {"law": "free-space"}},
        "storeys": [{"id": "S1", "elevation_m": 0, "height_m": 3}], "cells": [radio | {"id": f"C{i}"} for i in range(n)],
        "terminals": [radio | {"id": f"T{i}", "cell": f"C{i}", "target_down_db": 5, "target_up_db": 5} for i in range(n)],
        "measured_gains_db": {f"T{i}": {f"C{j}": rng.uniform(-110, -60) for j in range(n)} for i in range(n)},
    }
    down, up = solve(program, plan)["spectral_radius"], solve(program, plan, "--direction", "up")["spectral_radius"]
    if abs(down / up - 1) > 1e-11:
        faults.append(f"{n} pairs: {down} down, {up} up")
tap.check("down and up of pairs have one spectral radius", faults)


# ---- odd plans ----

def pairs(gains, carrier=None, radio=None, terminal=None):
    """gains[t][c] in dB."""
    base = {"storey": "S1", "x_m": 1, "y_m": 1, "height_m": 1, "power_dbm": 10, "power_min_dbm": -40, "power_max_dbm": 20, "power_step_db": 0} | (radio or {})
    n_cells = len(gains[0]) if gains else 0
    return {
        "undertone": 1, "carrier": {"frequency_mhz": 1000, "bandwidth_mhz": 20, "sharing": "orthogonal"} | (carrier or {}),
        "propagation": {"base": {"law": "free-space"}}, "storeys": [{"id": "S1", "elevation_m": 0, "height_m": 3}],
        "cells": [base | {"id": f"C{c}"} for c in range(n_cells)],
        "terminals": [base | {"id": f"T{t}", "target_down_db": 5, "target_up_db": 5} | (terminal or {}) for t in range(len(gains))],
        "measured_gains_db": {f"T{t}": {f"C{c}": g for c, g in enumerate(row)} for t, row in enumerate(gains)},
    }


two = [[-70, -90], [-95, -65]]
together = pairs(two)
del together["measured_gains_db"]
odd = {
    "nothing at all": pairs([]),
    "one link": pairs([[-70]]),
    "one cell, many terminals": pairs([[-70]] * 8),
    "nobody hears anybody else": pairs([[-70, -400], [-400, -70]]),
    "gains of 400 dB": pairs([[400, 390], [390, 400]]),
    "gains of -400 dB": pairs([[-400, -400], [-400, -400]]),
    "identical rows": pairs([[-70, -70]] * 4),
    "everybody in one place": together,
    "targets of 400 dB": pairs(two, terminal={"target_down_db": 400, "target_up_db": 400}),
    "targets of -400 dB": pairs(two, terminal={"target_down_db": -400, "target_up_db": -400}),
    "no targets": pairs(two, terminal={"target_down_db": None, "target_up_db": None}),
    "fixed powers": pairs(two, radio={"power_min_dbm": 20, "power_max_dbm": 20}),
    "powers of -400 dBm": pairs(two, radio={"power_min_dbm": -400, "power_max_dbm": -400}),
    "powers up to 400 dBm": pairs(two, radio={"power_min_dbm": -400, "power_max_dbm": 400}),
    "no activity": pairs(two, radio={"activity": 0}),
    "all off": pairs(two, radio={"on": False}),
    "steps of 400 dB": pairs(two, radio={"power_step_db": 400}),
    "steps of a hair": pairs(two, radio={"power_step_db": 0.0001}),
    "levels of 400 dBm": pairs(two, terminal={"level_down_dbm": 400, "level_up_dbm": 400}),
    "an EIRP limit of -400 dBm": pairs(two, {"eirp_limit_dbm": -400}),
    "three channels, none isolated": pairs(two, {"channels": 3, "channel_isolation_db": [0]}),
    "a chain one way": pairs([[-60, -400, -400], [-70, -60, -400], [-400, -70, -60]]),
    "a ring": pairs([[-60, -61, -400], [-400, -60, -61], [-61, -400, -60]]),
}


def no_constant(text):
    raise ValueError(f"{text} in JSON")


for name, plan in odd.items():
    faults = []
    for sharing, direction in itertools.product(("orthogonal", "simultaneous"), ("down", "up")):
        plan["carrier"]["sharing"] = sharing
        for words in [["solve", "--aim", aim] for aim in ("least-power", "equal-margin", "fewest-dropped", "as-set")] + [
                ["solve", "--hold", "400"], ["channels"], ["control", "--rounds", "5"], ["control", "--rule", "steps", "--rounds", "5", "--delay", "9"]]:
            for form in ("json", "text"):
                ran = run(program, words[0], "-", *words[1:], "--direction", direction, "--format", form, plan=plan)
                what = f"{sharing} {direction} {' '.join(words)}"
                complaints = [line for line in ran.stderr.decode().splitlines() if not line.startswith("undertone-cli: warning: ")]
                faults += same(f"{what}: exit", ran.returncode in ((0, 1) if words[0] == "solve" else (0,)), True) + same(f"{what}: complaints", complaints, [])
                text = ran.stdout.decode()
                if form == "json":
                    try:
                        json.loads(text, parse_constant=no_constant)
                    except ValueError as error:
                        faults.append(f"{what}: {error}")
                faults += [f"{what}: {word!r} in the text" for word in ("nan", "inf ", "-inf", "-0.0 ", "-0.00 ") if form == "text" and word in text]
    tap.check(f"odd: {name}", faults[:12])
tap.end()
