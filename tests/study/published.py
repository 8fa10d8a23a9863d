"""Published worked examples of power control, as plans, through undertone-cli.

usage: published.py UNDERTONE-CLI CASES_FILE

Each example's gain matrix is typed into a plan as measured gains, scaled to the plan's own noise, and solved in every case of sharing
and direction that has the same equations.  The sources stand in the cases file beside the figures.  Prints TAP.
"""
import json
import math
import subprocess
import sys

RELATIVE = 1e-6
NOTHING_DB = -400  # a gain or a power of nothing
NOISE_MW = 1.380649e-23 * 290 * 20e6 * 1e3  # kTB of the plans below, noise figure 0 dB


def db(ratio):
    return 10 * math.log10(ratio) if ratio > 0 else NOTHING_DB


def lin(value):
    return 10 ** (value / 10)


def make_plan(gains, serving, noise, target, least, most, sharing, margin_db=0.0):
    """gains[receiver][transmitter] between terminals and cells as the plan has them: gains[t][c]; serving[t]: index of the cell."""
    n_terminals, n_cells = len(gains), len(gains[0])
    radio = {"storey": "S1", "x_m": 0, "y_m": 0, "height_m": 1, "power_step_db": 0, "noise_figure_db": 0, "power_dbm": 0,
             "power_min_dbm": db(least), "power_max_dbm": db(most)}
    return {
        "undertone": 1,
        "carrier": {"frequency_mhz": 1000, "bandwidth_mhz": 20, "sharing": sharing, "margin_db": margin_db},
        "propagation": {"base": {"law": "free-space"}}, "constructions": [],
        "storeys": [{"id": "S1", "elevation_m": 0, "height_m": 3, "walls": []}], "antennas": [],
        "cells": [radio | {"id": f"C{c}"} for c in range(n_cells)],
        "terminals": [radio | {"id": f"T{t}", "cell": f"C{serving[t]}", "target_down_db": db(target), "target_up_db": db(target)}
                      for t in range(n_terminals)],
        "measured_gains_db": {f"T{t}": {f"C{c}": db(gains[t][c] * NOISE_MW / noise) for c in range(n_cells)}
                              for t in range(n_terminals)},
    }


def one_to_one(case, target=None, margin_db=0.0):
    """The plans that say the same as a square matrix of gains from transmitter j to the receiver of link i."""
    g, noise = case["gain"], case["noise"]
    n = len(g)
    target = case.get("target") if target is None else target
    least, most = case.get("power_min", 0), case.get("power_max", 1e12)
    turned = [[g[c][t] for c in range(n)] for t in range(n)]
    plans = []
    for sharing in ("orthogonal", "simultaneous"):
        # Downlink: terminal i hears cell j.  Uplink: cell i hears terminal j.
        plans.append(("down", sharing, make_plan(g, range(n), noise, target, least, most, sharing, margin_db)))
        plans.append(("up", sharing, make_plan(turned, range(n), noise, target, least, most, sharing, margin_db)))
    return plans


class Report:
    def __init__(self, program):
        self.program, self.done, self.bad = program, 0, 0

    def solve(self, plan, direction):
        run = subprocess.run([self.program, "solve", "-", "--format", "json", "--direction", direction], input=json.dumps(plan),
                             capture_output=True, text=True)
        if run.returncode not in (0, 1):
            raise RuntimeError(run.stderr)
        return json.loads(run.stdout)

    def check(self, what, pairs):
        """pairs: (name, got, expected, tolerance); texts are compared for equality."""
        faults = []
        for name, got, expected, tolerance in pairs:
            good = got == expected if isinstance(expected, str) else got is not None and abs(got - expected) <= tolerance
            if not good:
                faults.append(f"{name}: {got}, expected {expected}")
        self.done += 1
        self.bad += bool(faults)
        print(f"{'not ok' if faults else 'ok'} {self.done} - {what}")
        for fault in faults:
            print(f"# {fault}")


def powers(answer, expected):
    """Powers of the links, or of the cells where several links share one."""
    got = [link["power_dbm"] for link in answer["links"]]
    return [(f"power {i}", lin(p), e, RELATIVE * e) for i, (p, e) in enumerate(zip(got, expected, strict=True))]


def main():
    report = Report(sys.argv[1])
    with open(sys.argv[2], encoding="utf-8") as file:
        cases = {case["id"]: case for case in json.load(file)}

    case = cases["cvxpy-dgp"]
    for direction, sharing, plan in one_to_one(case):
        # The simultaneous downlink leaves a cell's minimum aside: the least powers lie above it here all the same.
        answer = report.solve(plan, direction)
        report.check(f"cvxpy-dgp, {sharing} {direction}: powers of the problem as stated",
                     [("verdict", answer["verdict"], "met", 0), ("radius", answer["spectral_radius"], case["radius"], 1e-6)]
                     + powers(answer, case["power"]))

    case = cases["ee263-2.1-9.9"]
    for gamma in (3, 5):
        for direction, sharing, plan in one_to_one(case, gamma, db(case["alpha"])):
            answer = report.solve(plan, direction)
            report.check(f"ee263-2.1-9.9, target {gamma}, {sharing} {direction}",
                         [("verdict", answer["verdict"], "met" if gamma == 3 else "interference-limited", 0),
                          ("radius", answer["spectral_radius"], case[f"radius_{gamma}"], 1e-6)]
                         + (powers(answer, case["power_3"]) if gamma == 3 else []))

    case = cases["ee263-3.29"]
    for direction, sharing, plan in one_to_one(case, 1):
        answer = report.solve(plan, direction)
        report.check(f"ee263-3.29, {sharing} {direction}: headroom over a target of 0 dB",
                     [("headroom", answer["headroom_db"], db(case["factor"]), 1e-6)])

    case = cases["ggplab"]
    for direction, sharing, plan in one_to_one(case):
        answer = report.solve(plan, direction)
        report.check(f"ggplab, {sharing} {direction}: powers and headroom near the edge",
                     [("verdict", answer["verdict"], "met", 0), ("radius", answer["spectral_radius"], case["radius"], 1e-6),
                      ("headroom", answer["headroom_db"], case["headroom_db"], 1e-6)]
                     + powers(answer, case["power"]))

    case = cases["hand-2x2"]
    for direction, sharing, plan in one_to_one(case):
        answer = report.solve(plan, direction)
        report.check(f"hand-2x2, {sharing} {direction}",
                     [("radius", answer["spectral_radius"], math.sqrt(0.06), 1e-9)] + powers(answer, case["power"]))

    case = cases["pair-conflict"]
    for direction, sharing, plan in one_to_one(case):
        answer = report.solve(plan, direction)
        report.check(f"pair-conflict, {sharing} {direction}",
                     [("verdict", answer["verdict"], "interference-limited", 0), ("radius", answer["spectral_radius"], case["radius"], 1e-6),
                      ("headroom", answer["headroom_db"], case["headroom_db"], 1e-6),
                      ("fallback", answer["fallback"], "equal-margin", 0)])

    case = cases["max-linear-3x4"]
    plan = make_plan(case["receiver_gain"], case["serving"], case["noise"], case["target"], 0, case["power_max"], "orthogonal")
    answer = report.solve(plan, "down")
    report.check("max-linear-3x4, orthogonal down",
                 [("verdict", answer["verdict"], "met", 0), ("headroom", answer["headroom_db"], case["headroom_db"], 1e-6)]
                 + powers(answer, [case["power"][c] for c in case["serving"]]))

    print(f"1..{report.done}")
    return 1 if report.bad else 0


sys.exit(main())
