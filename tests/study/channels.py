"""Channels found, against every assignment there is, on random plans.  usage: channels.py UNDERTONE-CLI"""
import copy
import itertools
import json
import pathlib
import random
import sys
import tempfile

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent))
from oracle import random_plan  # noqa: E402
from tap import Tap, enough, near, run, same, solve, trials  # noqa: E402

program = sys.argv[1]
tap = Tap()


def channels(plan, *options):
    ran = run(program, "channels", "-", "--format", "json", *options, plan=plan)
    if ran.returncode != 0:
        raise RuntimeError(ran.stderr.decode())
    return json.loads(ran.stdout)


def headroom(plan, direction, assignment):
    other = copy.deepcopy(plan)
    for cell, channel in zip(other["cells"], assignment):
        cell["channel"] = channel
    value = solve(program, other, "--direction", direction)["headroom_db"]
    return float("-inf") if value is None else value


faults, gained, compared = [], 0, 0
for seed in trials(2000, 2070):
    plan, direction = random_plan(seed)
    rng = random.Random(seed)
    n = rng.choice([2, 3])
    plan["carrier"] |= {"channels": n, "channel_isolation_db": rng.choice([[], [25], [15, 30]])}
    for cell in plan["cells"]:
        cell |= {"channel": rng.randint(1, n), "on": cell["on"] or rng.random() < 0.5}
    if len([c for c in plan["cells"] if c["on"]]) < 2 or not solve(program, plan, "--direction", direction)["links"]:
        continue
    found = channels(plan, "--direction", direction)
    got = [c["channel"] for c in found["channels"]]
    on = [c["on"] for c in plan["cells"]]
    own = [c["channel"] for c in plan["cells"]]
    every = [a for a in itertools.product(range(1, n + 1), repeat=len(on)) if all(o or a[k] == own[k] for k, o in enumerate(on))]
    if len(every) > 250:
        every = rng.sample(every, 250)
    best = max(headroom(plan, direction, a) for a in every)
    here = headroom(plan, direction, got)
    if best == float("-inf"):
        faults += same(f"plan {seed}: nothing helps", here, best)
        continue
    compared += 1
    gained += found["headroom_before_db"] is None or found["headroom_db"] > found["headroom_before_db"] + 0.01
    faults += near(f"plan {seed} headroom told and true", found["headroom_db"], here, 1e-7) + same(f"plan {seed} proved", found["proved"], True)
    if here < best - 0.0006:
        faults.append(f"plan {seed} {direction}: {got} has {here}, the best {best}")
    faults += [f"plan {seed}: a cell that is off was moved" for k, o in enumerate(on) if not o and got[k] != own[k]]
    if here <= headroom(plan, direction, own) + 1e-9:
        faults += same(f"plan {seed}: nothing is changed for nothing", got, own)
tap.check(f"no assignment gives more ({compared} plans, {gained} gained)", faults + enough(compared, 30) + enough(gained, 10))

# Fifteen cells on a grid, three channels: in the time of a test.
rng = random.Random(1)
radio = {"storey": "S1", "height_m": 3, "power_dbm": 20, "power_min_dbm": -60, "power_max_dbm": 20, "power_step_db": 0}
grid = {
    "undertone": 1, "carrier": {"frequency_mhz": 3750, "bandwidth_mhz": 20, "sharing": "orthogonal", "channels": 3, "channel_isolation_db": [30]},
    "propagation": {"base": {"law": "log-distance", "exponent": 3, "reference_m": 1}}, "storeys": [{"id": "S1", "elevation_m": 0, "height_m": 4}],
    "cells": [radio | {"id": f"C{k}", "x_m": 20 * (k % 5), "y_m": 20 * (k // 5)} for k in range(15)],
    "terminals": [radio | {"id": f"T{k}", "x_m": rng.uniform(0, 80), "y_m": rng.uniform(0, 40), "height_m": 1, "target_down_db": 8, "target_up_db": 5} for k in range(40)],
}
found = channels(grid)
tap.check(f"fifteen cells, three channels: {found['headroom_before_db']:.2f} to {found['headroom_db']:.2f} dB, {found['tried']} tried",
          same("proved", found["proved"], True) + same("gained", found["headroom_db"] > found["headroom_before_db"] + 3, True)
          + same("bound", found["bound_db"], found["headroom_db"]))
with tempfile.TemporaryDirectory() as folder:
    target = pathlib.Path(folder) / "with-channels.undertone"
    ran = run(program, "channels", "-", "--output", str(target), plan=grid)
    written = json.loads(target.read_text())
    tap.check("--output writes the plan with the channels found",
              same("exit", ran.returncode, 0) + same("channels", [c.get("channel", 1) for c in written["cells"]], [c["channel"] for c in found["channels"]])
              + near("headroom", solve(program, written)["headroom_db"], found["headroom_db"], 1e-9))
    again = channels(written)
    tap.check("what was found stays as it is", same("channels", again["channels"], found["channels"]))

# A search that has to give up says so, and its bound holds.
rng = random.Random(4)
big = copy.deepcopy(grid)
big["carrier"] |= {"channels": 4, "channel_isolation_db": [12, 25]}
big["cells"] = [radio | {"id": f"C{k}", "x_m": rng.uniform(0, 150), "y_m": rng.uniform(0, 150)} for k in range(26)]
big["terminals"] = [radio | {"id": f"T{k}", "x_m": rng.uniform(0, 150), "y_m": rng.uniform(0, 150), "height_m": 1, "target_down_db": 8, "target_up_db": 5} for k in range(70)]
found = channels(big)
tap.check(f"26 cells, four channels: {found['headroom_before_db']:.2f} to {found['headroom_db']:.2f} dB, at most {found['bound_db']:.2f}, proved: {found['proved']}",
          same("bound", found["bound_db"] >= found["headroom_db"], True) + same("gained", found["headroom_db"] > found["headroom_before_db"] + 1, True)
          + same("says so", found["proved"], found["bound_db"] <= found["headroom_db"] + 1e-9)
          + near("headroom", headroom(big, "down", [c["channel"] for c in found["channels"]]), found["headroom_db"], 1e-7))
tap.end()
