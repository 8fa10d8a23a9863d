"""Random plans, solved twice: by undertone-cli and by an independent computation.

usage: oracle.py UNDERTONE-CLI [FIRST COUNT]

The independent side knows docs/plan-file.md and the definitions of docs/methods.md and nothing of the program: a linear programme
(scipy's HiGHS) whose tight rows are then solved by numpy gives the least powers, eigenvalues of each strongly connected
component give the spectral radius, bisection with linear programmes gives the headroom.  Gains are typed into the plan, so that
only the power side is compared.  Prints TAP.
"""
import itertools
import json
import math
import random
import subprocess
import sys

import numpy as np
from scipy.optimize import linprog
from scipy.sparse.csgraph import connected_components

BOLTZMANN_J_K = 1.380649e-23
SLACK = 1e-9


def lin(db):
    return 10 ** (db / 10)


def db(ratio):
    return 10 * math.log10(ratio)


# --- random plans -------------------------------------------------------------------------------------------------------


def random_plan(seed):
    """A plan of one of the four cases; about half of them can be met."""
    rng = random.Random(seed)
    simultaneous, direction = bool(seed & 1), "up" if seed & 2 else "down"
    n_cells = rng.randint(1, 2 if simultaneous and rng.random() < 0.3 else 5)
    n_terminals = rng.randint(1, 10)
    channels = rng.choice([1, 1, 2, 3])
    loud = rng.uniform(-6, 22)  # how much better the serving cell is heard, on average
    carrier = {
        "frequency_mhz": 3750,
        "bandwidth_mhz": rng.choice([0.5, 20]),
        "sharing": "simultaneous" if simultaneous else "orthogonal",
        "processing_gain_db": rng.choice([0, 12, 18]) if simultaneous else 0,
        "downlink_orthogonality": rng.choice([0, 0.6, 1]) if simultaneous else 0,
        "channels": channels,
        "channel_isolation_db": rng.choice([[], [25], [20, 35]]),
        "noise_temperature_k": 290,
        "margin_db": rng.choice([0, 3]),
        "eirp_limit_dbm": rng.choice([None, None, 18]),
    }
    def least_of(most):
        return rng.choice([-400, -40, -10, most - 8, most - 3])

    most_down, most_up = [rng.choice([6, 14, 24]) for _ in range(n_cells)], [rng.choice([8, 23]) for _ in range(n_terminals)]
    cells = [
        {
            "id": f"C{c}", "storey": "S1", "x_m": 10 * c, "y_m": 0, "height_m": 3, "antenna": rng.choice(["isotropic", "omni"]),
            "power_dbm": rng.uniform(0, 24), "power_min_dbm": least_of(most_down[c]), "power_max_dbm": most_down[c],
            "power_step_db": 0, "feeder_loss_db": rng.choice([0, 1.5]), "noise_figure_db": rng.choice([5, 7]),
            "channel": rng.randint(1, channels), "activity": rng.choice([1, 1, 0.4]), "on": rng.random() < 0.9,
        }
        for c in range(n_cells)
    ]
    terminals, gains = [], {}
    for t in range(n_terminals):
        near = rng.randrange(n_cells)
        row = {f"C{c}": rng.uniform(-105, -78) + (loud if c == near else 0) for c in range(n_cells)}
        gains[f"T{t}"] = row
        terminals.append({
            "id": f"T{t}", "storey": "S1", "x_m": t, "y_m": 5, "height_m": 1.5,
            "power_dbm": 20, "power_min_dbm": least_of(most_up[t]), "power_max_dbm": most_up[t], "power_step_db": 0,
            "noise_figure_db": rng.choice([7, 9]), "activity": rng.choice([1, 1, 0.3, 0]), "on": rng.random() < 0.95,
            "cell": rng.choice([None, None, None, f"C{near}"]),
            "level_down_dbm": rng.choice([None, None, None, -75, -95]), "level_up_dbm": rng.choice([None, None, None, -80, -100]),
            "target_down_db": rng.choice([None, rng.uniform(-3, 12)]) if rng.random() < 0.2 else rng.uniform(-3, 12),
            "target_up_db": rng.uniform(-3, 10),
        })
    plan = {
        "undertone": 1, "title": f"random {seed}", "carrier": carrier, "propagation": {"base": {"law": "free-space"}},
        "constructions": [], "storeys": [{"id": "S1", "elevation_m": 0, "height_m": 4, "walls": []}],
        "antennas": [{"id": "omni", "pattern": "isotropic", "gain_dbi": 2}],
        "cells": cells, "terminals": terminals, "measured_gains_db": gains,
    }
    return plan, direction


# --- the independent computation ----------------------------------------------------------------------------------------


class Case:
    """What a plan asks for in one direction, straight from the definitions; powers in mW."""

    def __init__(self, plan, direction):
        self.carrier = carrier = plan["carrier"]
        self.down = direction == "down"
        self.simultaneous = carrier["sharing"] == "simultaneous"
        self.cells = {c["id"]: c for c in plan["cells"]}
        self.terminals = {t["id"]: t for t in plan["terminals"]}
        self.h = {(c, t): lin(plan["measured_gains_db"][t][c]) for t in self.terminals for c in self.cells}
        self.g = lin(carrier["processing_gain_db"]) if self.simultaneous else 1
        self.gain_dbi = {a["id"]: a["gain_dbi"] for a in plan["antennas"]} | {"isotropic": 0}
        self.live, self.serving, self.orphans = [], {}, []
        for t in plan["terminals"]:
            if not t["on"] or t["target_down_db" if self.down else "target_up_db"] is None:
                continue
            on = [c for c in plan["cells"] if c["on"]]
            if t["cell"] is not None:
                on = [c for c in on if c["id"] == t["cell"]]
            if not on:
                self.orphans.append(t["id"])
                continue
            self.serving[t["id"]] = max(on, key=lambda c: plan["measured_gains_db"][t["id"]][c["id"]])["id"]
            self.live.append(t["id"])
        self.idle = [c["id"] for c in plan["cells"] if c["on"] and c["id"] not in self.serving.values()] if self.down else []

    def k(self, one, other):
        apart = abs(self.cells[one]["channel"] - self.cells[other]["channel"])
        isolation = self.carrier["channel_isolation_db"]
        if apart == 0:
            return 1
        return lin(-isolation[min(apart, len(isolation)) - 1]) if isolation else 0

    def gamma(self, t):
        return lin(self.terminals[t]["target_down_db" if self.down else "target_up_db"] + self.carrier["margin_db"])

    def noise(self, t):
        f = self.terminals[t]["noise_figure_db"] if self.down else self.cells[self.serving[t]]["noise_figure_db"]
        return BOLTZMANN_J_K * self.carrier["noise_temperature_k"] * self.carrier["bandwidth_mhz"] * 1e6 * lin(f) * 1e3

    def limit(self, radio):
        limit = radio["power_max_dbm"]
        if self.carrier["eirp_limit_dbm"] is not None:
            limit = min(limit, self.carrier["eirp_limit_dbm"] - self.gain_dbi[radio.get("antenna", "isotropic")]
                        + radio.get("feeder_loss_db", 0))
        return lin(limit)

    def level(self, t):
        value = self.terminals[t]["level_down_dbm" if self.down else "level_up_dbm"]
        return 0 if value is None else lin(value) / self.h[self.serving[t], t]

    def sender(self, t):
        return self.cells[self.serving[t]] if self.down else self.terminals[t]

    def rows(self, minima=True, idle=True):
        """(names, target rows, other rows, limits): a row is (i, constant, {j: weight}), x_i at least that;
        target rows are those that a common factor scales; limits are ({names}, mW)."""
        targets, others, limits, names = [], [], [], []
        own = {t: self.serving[t] for t in self.live}
        if self.down and not self.simultaneous:
            names = sorted(set(own.values()))
            for c in names:
                others.append((c, lin(self.cells[c]["power_min_dbm"]) if minima else 0, {}))
                limits.append(({c}, self.limit(self.cells[c])))
        elif self.down:
            names = list(self.live)
            limits = [({t for t in names if own[t] == c}, self.limit(self.cells[c])) for c in sorted(set(own.values()))]
        else:
            names = list(self.live)
            for t in names:
                others.append((t, lin(self.terminals[t]["power_min_dbm"]) if minima else 0, {}))
                limits.append(({t}, self.limit(self.terminals[t])))
        for t in self.live:
            c, h = own[t], self.h[own[t], t]
            x = c if self.down and not self.simultaneous else t
            scale = self.gamma(t) / self.g / h
            weights, constant = {}, self.noise(t)
            if self.down:
                if idle:
                    constant += sum(self.k(c, d) * self.cells[d]["activity"] * lin(self.cells[d]["power_min_dbm"]) * self.h[d, t]
                                    for d in self.idle)
                if self.simultaneous:
                    for j in self.live:
                        if j != t:
                            gain = (1 - self.carrier["downlink_orthogonality"]) * h if own[j] == c else self.k(c, own[j]) * self.h[own[j], t]
                            weights[j] = gain * self.terminals[j]["activity"]
                else:
                    weights = {d: self.k(c, d) * self.cells[d]["activity"] * self.h[d, t] for d in names if d != c}
            elif self.simultaneous:
                weights = {j: self.k(c, own[j]) * self.terminals[j]["activity"] * self.h[c, j] for j in self.live if j != t}
            else:
                weights = {("heard", c, d): 1.0 for d in set(own.values()) if d != c}
            targets.append((x, scale * constant, {j: scale * w for j, w in weights.items() if w > 0}))
            others.append((x, self.level(t), {}))
        if not self.down and not self.simultaneous:
            for c in set(own.values()):
                for j in self.live:
                    if own[j] != c:
                        weight = self.k(c, own[j]) * self.terminals[j]["activity"] * self.h[c, j]
                        others.append((("heard", c, own[j]), 0, {j: weight} if weight > 0 else {}))
            names += sorted({i for i, _, _ in others if isinstance(i, tuple)})
        return names, targets, others, limits

    def radius(self):
        """The largest eigenvalue over all choices of one target row a power and one loudest terminal a group."""
        names, targets, others, _ = self.rows(minima=False, idle=False)
        choices = {n: [] for n in names}
        for i, _, weights in targets + [o for o in others if isinstance(o[0], tuple)]:
            choices[i].append(weights)
        index = {n: i for i, n in enumerate(names)}
        best = 0.0
        for policy in itertools.product(*choices.values()):
            matrix = np.zeros((len(names), len(names)))
            for i, weights in zip(choices, policy):
                for j, w in weights.items():
                    matrix[index[i], index[j]] = w
            best = max(best, component_radius(matrix, [isinstance(n, tuple) for n in names]))
        return best


def component_radius(matrix, helper):
    """Spectral radius; helper variables (uplink groups) are eliminated first, so that they don't count as steps of their own."""
    h = np.array(helper)
    f = matrix[np.ix_(~h, ~h)] + matrix[np.ix_(~h, h)] @ matrix[np.ix_(h, ~h)]
    n, labels = connected_components(f > 0, directed=True, connection="strong")
    best = 0.0
    for part in range(n):
        rows = np.flatnonzero(labels == part)
        block = f[np.ix_(rows, rows)]
        if len(rows) > 1 or block[0, 0] > 0:
            # Balanced by a diagonal, which leaves eigenvalues alone.
            d = np.ones(len(rows))
            for _ in range(200):
                r, c = block @ d / d, (1 / d) @ block * d
                d *= np.sqrt(np.sqrt(np.maximum(r, 1e-300) / np.maximum(c, 1e-300)))
            best = max(best, max(abs(np.linalg.eigvals(block / d[:, None] * d[None, :]))))
    return best


def least(case, factor, limited, **lift):
    """Least powers by a linear programme, polished on its tight rows; None where there are none."""
    names, targets, others, limits = case.rows(**lift)
    index = {n: i for i, n in enumerate(names)}
    rows = [(i, factor * c, {j: factor * w for j, w in ws.items()}) for i, c, ws in targets] + others
    unit = np.zeros(len(names))  # what each power is at least, as the unit it is counted in
    for i, c, _ in rows:
        unit[index[i]] = max(unit[index[i]], c)
    for _ in range(len(names)):
        for i, c, ws in rows:
            if isinstance(i, tuple):
                unit[index[i]] = max(unit[index[i]], sum(w * unit[index[j]] for j, w in ws.items()))
    unit[unit == 0] = 1e-30
    a, b = [], []
    for i, c, ws in rows:
        row = np.zeros(len(names))
        row[index[i]] = -1
        for j, w in ws.items():
            row[index[j]] += w * unit[index[j]] / unit[index[i]]
        size = max(1.0, abs(row).max())
        a.append(row / size)
        b.append(-c / unit[index[i]] / size)
    if limited:
        for members, limit in limits:
            row = np.zeros(len(names))
            for m in members:
                row[index[m]] = unit[index[m]] / limit
            size = max(abs(row).max(), 1.0)
            a.append(row / size)
            b.append(1.0 / size)
    result = linprog(np.ones(len(names)), A_ub=np.array(a), b_ub=np.array(b), bounds=(0, None), method="highs",
                     options={"primal_feasibility_tolerance": 1e-10, "dual_feasibility_tolerance": 1e-10})
    if result.status != 0:
        return None
    # One tight row a power.
    best = {}
    for (i, c, ws), row, bound in zip(rows, a, b):
        value = (c + sum(w * result.x[index[j]] * unit[index[j]] for j, w in ws.items())) / unit[index[i]]
        if i not in best or value > best[i][0]:
            best[i] = (value, c, ws)
    matrix, constant = np.eye(len(names)), np.zeros(len(names))
    for i, (_, c, ws) in best.items():
        constant[index[i]] = c / unit[index[i]]
        for j, w in ws.items():
            matrix[index[i], index[j]] -= w * unit[index[j]] / unit[index[i]]
    x = np.linalg.solve(matrix, constant) * unit
    return {n: x[index[n]] for n in names}


def keeps_limits(case, powers):
    return all(sum(powers[m] for m in members) <= limit * (1 + SLACK) for members, limit in case.rows()[3])


def verdict(case):
    if case.orphans:
        return "noise-limited"
    for t in case.live:
        if case.gamma(t) / case.g * case.noise(t) > case.limit(case.sender(t)) * case.h[case.serving[t], t] * (1 + SLACK):
            return "noise-limited"
    for t in case.live:
        if case.level(t) > case.limit(case.sender(t)) * (1 + SLACK):
            return "level-limited"
    if case.radius() >= 1:
        return "interference-limited"
    powers = least(case, 1, False, minima=False, idle=False)
    if powers is None or not keeps_limits(case, powers):
        return "power-limited"
    powers = least(case, 1, False)
    if powers is None or not keeps_limits(case, powers):
        return "minimum-limited"
    return "met"


def headroom(case):
    """By bisection in dB; None where not even -300 dB is feasible."""
    if least(case, lin(-300), True) is None:
        return None
    low, high = -60.0, 120.0
    while high - low > 2e-5:
        middle = (low + high) / 2
        low, high = (middle, high) if least(case, lin(middle), True) is not None else (low, middle)
    return (low + high) / 2


# --- comparison ---------------------------------------------------------------------------------------------------------


def close(one, other, absolute, relative=0.0):
    if one is None or other is None:
        return one is other
    return abs(one - other) <= absolute + relative * abs(other)


def push_past_limits(plan, direction):
    """Raises the targets to where no power within the limits meets them though powers without limits would."""
    case = Case(plan, direction)
    radius, within = (case.radius(), headroom(case)) if case.live else (0, None)
    if within is None or radius <= 0 or -db(radius) < within + 0.05:
        return
    for terminal in plan["terminals"]:
        for key in ("target_down_db", "target_up_db"):
            if terminal[key] is not None:
                terminal[key] += within + 0.5 * (-db(radius) - within)


def compare(program, seed):
    """Faults of one random plan, as texts."""
    plan, direction = random_plan(seed)
    if seed % 7 == 3:
        push_past_limits(plan, direction)
    run = subprocess.run([program, "solve", "-", "--format", "json", "--direction", direction], input=json.dumps(plan),
                         capture_output=True, text=True)
    if run.returncode not in (0, 1):
        return [f"exit {run.returncode}: {run.stderr}"], None
    answer = json.loads(run.stdout)
    case = Case(plan, direction)
    faults = []
    if not case.live:
        expected = ("noise-limited" if case.orphans else "met"), None, None
    else:
        expected = verdict(case), case.radius(), headroom(case)
    got = answer["verdict"], answer["spectral_radius"], answer["headroom_db"]
    if got[0] != expected[0]:
        faults.append(f"verdict {got[0]}, expected {expected[0]}")
    if not close(got[1], expected[1], 1e-6, 1e-6):
        faults.append(f"spectral radius {got[1]}, expected {expected[1]}")
    if not close(got[2], expected[2], 1e-4):
        faults.append(f"headroom {got[2]}, expected {expected[2]}")
    if run.returncode != (0 if expected[0] == "met" else 1):
        faults.append(f"exit {run.returncode} with verdict {expected[0]}")
    if expected[0] == "met" and case.live:
        powers = least(case, 1, False)
        for link in answer["links"]:
            name = link["cell"] if case.down and not case.simultaneous else link["terminal"]
            if not close(lin(link["power_dbm"]), powers[name], 0, 1e-6):
                faults.append(f"power of {link['terminal']}: {lin(link['power_dbm'])} mW, expected {powers[name]}")
            if link["margin_db"] < -1e-6:
                faults.append(f"margin of {link['terminal']}: {link['margin_db']}")
    return faults, expected[0]


def main():
    program = sys.argv[1]
    first, count = (int(sys.argv[2]), int(sys.argv[3])) if len(sys.argv) > 3 else (0, 200)
    seen = {}
    bad = 0
    for seed in range(first, first + count):
        faults, expected = compare(program, seed)
        seen[expected] = seen.get(expected, 0) + 1
        bad += bool(faults)
        print(f"{'not ok' if faults else 'ok'} {seed - first + 1} - random plan {seed}, {expected}", flush=True)
        for fault in faults:
            print(f"# {fault}")
    # The plans must reach what they are meant to compare.
    wanted = {"met": 40, "interference-limited": 10, "power-limited": 3, "minimum-limited": 3, "noise-limited": 3, "level-limited": 3}
    missing = {v: n for v, n in wanted.items() if count >= 200 and seen.get(v, 0) < n}
    print(f"{'not ok' if missing else 'ok'} {count + 1} - every verdict occurs often enough")
    print(f"# {seen}")
    print(f"1..{count + 1}")
    return 1 if bad or missing else 0


if __name__ == "__main__":
    sys.exit(main())
