"""Power steps and reserves against exhaustive search and bisection on random plans.  usage: solver.py UNDERTONE-CLI"""
import itertools
import pathlib
import random
import sys

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent))
from oracle import Case, db, keeps_limits, least, lin, random_plan  # noqa: E402
from tap import Tap, enough, near, same, solve, trials  # noqa: E402

program = sys.argv[1]
tap = Tap()
NOISE_MW = 1.380649e-23 * 290 * 20e6 * 1e3


def stepped(gains, noise, target, least_db, most_db, step_db, sharing, uplink):
    """A square system as a plan: gains[i][j] from transmitter j to the receiver of link i."""
    n = len(gains)
    radio = {"storey": "S1", "x_m": 0, "y_m": 0, "height_m": 1, "noise_figure_db": 0, "power_dbm": 0, "power_min_dbm": least_db, "power_max_dbm": most_db,
             "power_step_db": step_db}
    heard = {f"T{t}": {f"C{c}": db((gains[c][t] * NOISE_MW / noise[c]) if uplink else (gains[t][c] * NOISE_MW / noise[t])) for c in range(n)} for t in range(n)}
    return {
        "undertone": 1, "carrier": {"frequency_mhz": 1000, "bandwidth_mhz": 20, "sharing": sharing}, "propagation": {"base": {"law": "free-space"}}, "constructions": [],
        "storeys": [{"id": "S1", "elevation_m": 0, "height_m": 3, "walls": []}], "antennas": [], "cells": [radio | {"id": f"C{i}"} for i in range(n)],
        "terminals": [radio | {"id": f"T{i}", "cell": f"C{i}", "target_down_db": db(target), "target_up_db": db(target)} for i in range(n)], "measured_gains_db": heard,
    }


# An example worked out for this project: rounding the least powers (8.01, 7.99) dB up to the 2 dB step breaks link 2; the least levels are (10, 10) dB.
for sharing, direction in (("orthogonal", "down"), ("orthogonal", "up"), ("simultaneous", "up")):
    plan = stepped([[1, 0.35], [0.45, 1]], [0.96, 0.30], 2.0, 0, 30, 2, sharing, direction == "up")
    answer = solve(program, plan, "--direction", direction)
    links = answer["links"]
    tap.check(f"rounding up fails, {sharing} {direction}: least levels (10, 10)",
              same("verdict", answer["verdict"], "met") + near("headroom", answer["headroom_db"], 0.9957101352386779, 1e-6)
              + near("p1", links[0]["power_dbm"], 10, 1e-9) + near("p2", links[1]["power_dbm"], 10, 1e-9)
              + near("margin 1", links[0]["margin_db"], 0.496351456238769, 1e-6) + near("margin 2", links[1]["margin_db"], 0.17728766960431616, 1e-6))


def met(case, powers):
    """Every target and level at these powers of the senders, by the definitions."""
    _, targets, others, _ = case.rows()
    values = dict(powers)
    for i, _, weights in others:
        if isinstance(i, tuple):
            values[i] = max(values.get(i, 0), sum(w * powers[j] for j, w in weights.items()))
    for i, constant, weights in targets + [row for row in others if not isinstance(row[0], tuple)]:
        if values[i] < (constant + sum(w * values[j] for j, w in weights.items())) * (1 - 1e-9):
            return False
    return True


def small_plan(seed, with_steps):
    plan, direction = random_plan(seed)
    rng = random.Random(seed + 77)
    plan["cells"], plan["terminals"] = plan["cells"][:3], plan["terminals"][:4]
    cells = {c["id"] for c in plan["cells"]}
    for terminal in plan["terminals"]:
        if terminal["cell"] not in cells:
            terminal["cell"] = None
    plan["measured_gains_db"] = {t["id"]: {c: plan["measured_gains_db"][t["id"]][c] for c in cells} for t in plan["terminals"]}
    for radio in plan["cells"] + plan["terminals"] if with_steps else []:
        radio["power_step_db"] = rng.choice([1, 2, 3])
        radio["power_min_dbm"] = radio["power_max_dbm"] - rng.randint(2, 5) * radio["power_step_db"]
    return plan, direction


def ladder(case, radio):
    levels, k = [], 0
    while lin(radio["power_min_dbm"] + k * radio["power_step_db"]) <= case.limit(radio) * (1 + 1e-9):
        levels.append(lin(radio["power_min_dbm"] + k * radio["power_step_db"]))
        k += 1
    return levels


compared = {"met": 0, "step-limited": 0}
faults = []
for seed in trials(400):
    if seed & 3 == 1:  # simultaneous downlink: no steps there
        continue
    plan, direction = small_plan(seed, True)
    if seed % 8 < 4:  # so little headroom that steps matter
        headroom_db = solve(program, plan, "--direction", direction)["headroom_db"]
        for terminal in plan["terminals"]:
            for key in ("target_down_db", "target_up_db"):
                if terminal[key] is not None and headroom_db is not None:
                    terminal[key] += headroom_db - 0.3
    case = Case(plan, direction)
    answer = solve(program, plan, "--direction", direction)
    if not case.live or answer["verdict"] not in compared:
        continue
    names = sorted(set(case.serving.values())) if case.down else list(case.live)
    radios = case.cells if case.down else case.terminals
    good = [levels for levels in itertools.product(*(ladder(case, radios[n]) for n in names)) if met(case, dict(zip(names, levels)))]
    compared[answer["verdict"]] += 1
    if answer["verdict"] != ("met" if good else "step-limited"):
        faults.append(f"plan {seed}: {answer['verdict']}, {len(good)} level vectors work")
    elif good:
        expected = [min(column) for column in zip(*good)]
        got = {(link["cell"] if case.down else link["terminal"]): lin(link["power_dbm"]) for link in answer["links"]}
        faults += [f"plan {seed}: {n} at {got[n]}, expected {e}" for n, e in zip(names, expected) if abs(got[n] / e - 1) > 1e-9]
    else:
        tops = {n: ladder(case, radios[n])[-1] for n in names}
        got = {(link["cell"] if case.down else link["terminal"]): lin(link["power_dbm"]) for link in answer["links"]}
        faults += same(f"plan {seed} fallback", answer["fallback"], "clipped-steps")
        faults += [f"plan {seed}: {n} above its top level" for n in names if got[n] > tops[n] * (1 + 1e-9)]
        # Whoever is below its top level has what it needs.
        faults += [f"plan {seed}: {link['terminal']} is short below its top level" for link in answer["links"]
                   if link["margin_db"] < -1e-6 and got[link["cell"] if case.down else link["terminal"]] < tops[link["cell"] if case.down else link["terminal"]] * (1 - 1e-9)]
tap.check(f"least levels are those of exhaustive search ({compared})", faults)
tap.check("both outcomes occur", [f"{v}: {fault}" for v, n in compared.items() for fault in enough(n, 10)])


def feasible(plan, direction):
    case = Case(plan, direction)
    powers = least(case, 1, False) if not case.orphans else None
    return powers is not None and keeps_limits(case, powers)


faults, found = [], {"positive": 0, "negative": 0, "null": 0}
for seed in trials(1000, 1160):
    plan, direction = small_plan(seed, False)
    answer = solve(program, plan, "--direction", direction)
    key = "target_down_db" if direction == "down" else "target_up_db"
    for link in answer["links"][:3]:
        if link["cell"] is None:
            faults += same(f"plan {seed} {link['terminal']} without a cell", link["reserve_db"], None)
            continue
        terminal = next(t for t in plan["terminals"] if t["id"] == link["terminal"])
        target, reserve, served = terminal[key], link["reserve_db"], terminal["cell"]
        terminal["cell"] = link["cell"]  # serving cells stay as they are
        if reserve is None:
            found["null"] += 1
            terminal[key] = max(target - 300, -390)
            if feasible(plan, direction):
                faults.append(f"plan {seed} {link['terminal']}: null, but lowering it heals")
        else:
            found["positive" if reserve >= 0 else "negative"] += 1
            for change, expected in ((reserve - 1e-4, True), (reserve + 1e-4, False)):
                terminal[key] = target + change
                if feasible(plan, direction) != expected:
                    faults.append(f"plan {seed} {link['terminal']}: reserve {reserve}, but {'not ' if expected else ''}feasible at {change}")
        terminal[key], terminal["cell"] = target, served
tap.check(f"reserves are where feasibility ends ({found})", faults)
tap.check("reserves of every kind occur", [f"{v}: {fault}" for v, n in found.items() for fault in enough(n, 20)])
tap.end()
