"""The commissioning sheet: powers that can be typed in, that keep every target, and that are the least of their ladders.

usage: powers.py UNDERTONE-CLI EXAMPLES_FOLDER

Each sheet is put back into its plan as powers set and solved anew.  That they are the least is the definition of a least fixed point: no radio can take one rung less without
a link of its own failing.  10 log10 of milliwatts and of ports: the definition of the decibel.
"""
import csv
import io
import json
import math
import pathlib
import sys

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
from tap import Tap, near, run, same, solve  # noqa: E402

program, examples = sys.argv[1], pathlib.Path(sys.argv[2])
tap = Tap()


def sheet(plan, *options):
    return json.loads(run(program, "powers", "-", "--format", "json", *options, plan=plan).stdout)


def with_powers(plan, powers):
    """The plan with these powers set; a radio's range gives way to them."""
    plan = json.loads(json.dumps(plan))
    for radio in plan["cells"] + plan["terminals"]:
        if radio["id"] in powers:
            power = powers[radio["id"]]
            radio.update(power_dbm=power, power_min_dbm=min(radio["power_min_dbm"], power), power_max_dbm=max(radio["power_max_dbm"], power), power_step_db=0)
    return plan


def failing(plan, powers, direction):
    answer = solve(program, with_powers(plan, powers), "--aim", "as-set", "--direction", direction)
    return {link["terminal"]: link["cell"] for link in answer["links"] if link["margin_db"] < -1e-6}


for file in sorted(examples.glob("*.undertone")):
    plan = json.loads(file.read_text())
    radios = {radio["id"]: radio for radio in plan["cells"] + plan["terminals"]}
    for direction in ("down", "up"):
        answer = solve(program, plan, "--direction", direction)
        told = sheet(plan, "--direction", direction, "--ports", "4")
        faults = same("radios", [row["id"] for row in told["radios"]], [sender["id"] for sender in answer["transmitters"]])
        faults += same("verdict", told["verdict"], answer["verdict"])
        powers = {row["id"]: row["power_dbm"] for row in told["radios"]}
        continuous = {sender["id"]: sender["power_dbm"] for sender in answer["transmitters"]}
        for row in told["radios"]:
            faults += near(f"{row['id']} in mW", row["power_mw"], 10 ** (row["power_dbm"] / 10), 1e-9 * row["power_mw"])
            faults += near(f"{row['id']} a port", row["port_power_dbm"], row["power_dbm"] - 10 * math.log10(4), 1e-9)
            if answer["verdict"] == "met" and row["power_dbm"] < continuous[row["id"]] - 1e-6:
                faults.append(f"{row['id']}: {row['power_dbm']} is below the least power {continuous[row['id']]}")
        if plan["carrier"]["sharing"] == "simultaneous" and direction == "down":
            faults += same("kept is not told where a cell shares its power", told["kept"], None)
        elif answer["verdict"] == "met":
            faults += same("kept", told["kept"], True)
            faults += same("failing with the powers typed in", failing(plan, powers, direction), {})
        if answer["verdict"] == "met" and told["ladder_db"] is not None:
            for row in told["radios"]:
                radio = radios[row["id"]]
                step = radio["power_step_db"] or told["ladder_db"]
                low = radio["power_min_dbm"] if radio["power_step_db"] else math.ceil(radio["power_min_dbm"] / step - 1e-9) * step
                rungs = (row["power_dbm"] - low) / step
                if abs(rungs - round(rungs)) > 1e-6:
                    faults.append(f"{row['id']}: {row['power_dbm']} is on no rung of {step} dB")
                if round(rungs) == 0:
                    continue
                fail = failing(plan, {**powers, row["id"]: row["power_dbm"] - step}, direction)
                own = row["id"] in fail if direction == "up" else row["id"] in fail.values()
                if not own:
                    faults.append(f"{row['id']} could be a rung lower")
        tap.check(f"{file.stem}, {direction}: powers that can be typed in, and no less would do", faults)

# CSV: a row a radio, the planner's own columns behind, direction from north.
plan = json.loads((examples / "cold-store.undertone").read_text())
plan["site"] = {**plan.get("site", {}), "north_deg": 30}
plan["cells"][0]["fields"] = {"cable tag": "A-07", "rack": 3}
rows = list(csv.DictReader(io.StringIO(run(program, "powers", "-", "--format", "csv", plan=plan).stdout.decode())))
first = rows[0]
tap.check("CSV with the planner's columns and directions from true north",
          same("rows", len(rows), 4) + same("own", (first["cable tag"], first["rack"], rows[1]["rack"]), ("A-07", "3", ""))
          + near("from north", float(first["true_azimuth_deg"]), (plan["cells"][0]["azimuth_deg"] - 30) % 360, 1e-9))

# Odd cases: nothing to set, wrong use.
empty = json.dumps({**plan, "cells": [], "terminals": [], "measured_gains_db": {}})
ran = run(program, "powers", "-", "--format", "json", plan=empty)
tap.check("a plan without radios has an empty sheet", same("exit", ran.returncode, 0) + same("radios", json.loads(ran.stdout)["radios"], []))
for ports in ("0", "-1", "many"):
    ran = run(program, "powers", "-", "--ports", ports, plan=plan)
    tap.check(f"--ports {ports} is refused", same("exit", ran.returncode, 2) + same("told", b"from 1 to 1024" in ran.stderr, True))
tap.end()
