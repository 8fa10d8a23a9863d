"""Gains of random sites under every law, against a second computation, and what must not change them.  usage: propagation.py UNDERTONE-CLI

The second computation has its own geometry and its own formulas: ITU-R P.525-5, P.1238-11 and -8, 3GPP TR 38.901 table 7.4.1-1 and 7.3-1, COST 231. Walls
have typed-in losses here; layered ones are compared with published values in tests/radio.
"""
import copy
import json
import math
import pathlib
import random
import sys

import numpy as np

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
from tap import Tap, enough, near, run, same, solve, trials  # noqa: E402

program = sys.argv[1]
tap = Tap()
C_M_S = 299792458


def gains(plan):
    ran = run(program, "gains", "-", "--format", "json", plan=plan)
    if ran.returncode:
        raise RuntimeError(ran.stderr.decode())
    answer = json.loads(ran.stdout)
    return {(t, c): g for t, row in zip(answer["terminals"], answer["gain_db"]) for c, g in zip(answer["cells"], row)}, ran.stderr.decode()


# --- random sites -------------------------------------------------------------------------------------------------------

def random_base(rng):
    sight = rng.choice(["los", "nlos", "by-walls"])
    return rng.choice([
        {"law": "free-space"}, {"law": "log-distance", "exponent": rng.uniform(1.5, 4), "reference_m": rng.choice([1, 3])},
        {"law": "site-general", "environment": rng.choice(["office", "corridor", "industrial"]), "sight": sight},
        {"law": "distance-coefficient", "coefficient": rng.choice([22, 28, 31]), "floor_loss_db": rng.choice([[], [15], [9, 19, 24]])},
        {"law": "indoor-office", "sight": sight}, {"law": "indoor-factory", "sight": sight, "clutter": rng.choice(["sl", "dl", "sh", "dh"])},
        {"law": "multi-wall"}, {"law": "multi-wall", "light_db": 3, "heavy_db": 8, "floor_db": 15, "b": 0.5},
    ])


def random_site(seed):
    rng = random.Random(seed)
    constructions = [{"id": "thin", "loss_db": 0.6}, {"id": "stud", "loss_db": 4, "class": "light"}, {"id": "core", "loss_db": 17, "class": "heavy"}, {"id": "slab", "loss_db": 22}]
    storeys = []
    for s in range(rng.randint(1, 3)):
        walls = [{"id": f"W{k}", "construction": rng.choice(["thin", "stud", "core"]),
                  "points": [[rng.uniform(0, 40), rng.uniform(0, 25)] for _ in range(rng.randint(2, 4))]} for k in range(rng.randint(0, 25))]
        storeys.append({"id": f"S{s}", "elevation_m": 3.5 * s, "height_m": 3.5, "floor": "slab" if s or rng.random() < 0.5 else None, "walls": walls})
    antennas = [{"id": "omni", "pattern": "isotropic", "gain_dbi": 2}, {"id": "panel", "pattern": "sector", "gain_dbi": 8, "beamwidth_h_deg": 65, "beamwidth_v_deg": 40},
                {"id": "whip", "pattern": "dipole"},
                {"id": "cut", "pattern": "cuts", "horizontal_dbi": [rng.uniform(-15, 5) for _ in range(12)], "vertical_dbi": [rng.uniform(-15, 5) for _ in range(13)]}]

    def radio(name, **more):
        return {"id": name, "storey": rng.choice(storeys)["id"], "x_m": rng.uniform(0, 40), "y_m": rng.uniform(0, 25), "height_m": rng.uniform(0.3, 3.2), "power_dbm": 0,
                "power_min_dbm": -10, "power_max_dbm": 20, "power_step_db": 0, "antenna": rng.choice(["isotropic", "omni", "panel", "whip", "cut"]),
                "azimuth_deg": rng.uniform(-180, 360), "downtilt_deg": rng.choice([0, rng.uniform(-90, 90)]), "feeder_loss_db": rng.choice([0, 1.5])} | more
    return {
        "undertone": 1, "carrier": {"frequency_mhz": rng.choice([868.3, 1800, 3750, 5500, 26000]), "bandwidth_mhz": 20, "sharing": "orthogonal"},
        "propagation": {"base": random_base(rng), "walls": rng.random() < 0.85, "excess_loss_limit_db": rng.choice([None, None, 30])},
        "constructions": constructions, "storeys": storeys, "antennas": antennas, "cells": [radio(f"C{k}") for k in range(3)],
        "terminals": [radio(f"T{k}", target_down_db=0, target_up_db=0, body_loss_db=rng.choice([0, 3])) for k in range(4)],
    }


# --- the second computation ---------------------------------------------------------------------------------------------

def place(plan, radio):
    return (radio["x_m"], radio["y_m"], next(s for s in plan["storeys"] if s["id"] == radio["storey"])["elevation_m"] + radio["height_m"])


def crossings(plan, a, b):
    """(construction, is a floor) of everything on the ray; no ray of these sites meets a corner."""
    found = []
    for storey in plan["storeys"]:
        for wall in storey["walls"]:
            for p, q in zip(wall["points"], wall["points"][1:]):
                # Both pairs of ends on different sides of the other's line.
                def side(o, d, x):
                    return (d[0] - o[0]) * (x[1] - o[1]) - (d[1] - o[1]) * (x[0] - o[0])
                s, t = side(p, q, a), side(p, q, b)
                if s * t < 0 and side(a, b, p) * side(a, b, q) < 0:
                    z = a[2] + s / (s - t) * (b[2] - a[2])
                    if storey["elevation_m"] <= z < storey["elevation_m"] + storey["height_m"]:
                        found.append((wall["construction"], False))
        if storey["floor"] and min(a[2], b[2]) < storey["elevation_m"] <= max(a[2], b[2]):
            found.append((storey["floor"], True))
    return found


def free_space(f_hz, d):
    return 20 * math.log10(4 * math.pi * d * f_hz / C_M_S)


def base_loss(plan, d, found):
    """Loss, whether the walls are in it."""
    base, f_hz = plan["propagation"]["base"], plan["carrier"]["frequency_mhz"] * 1e6
    f_ghz, log_d = f_hz / 1e9, math.log10(max(d, 1))
    losses = {c["id"]: c["loss_db"] for c in plan["constructions"]}
    floors = sum(is_floor for _, is_floor in found)
    nlos = base.get("sight") == "nlos" or (base.get("sight") == "by-walls" and any(losses[c] >= 1 for c, _ in found))
    law = base["law"]
    if law == "free-space":
        return free_space(f_hz, max(d, 1)), False
    if law == "log-distance":
        r = base["reference_m"]
        return free_space(f_hz, r) + 10 * base["exponent"] * math.log10(max(d, 1, r) / r), False
    if law == "site-general":
        alpha, beta, gamma = {
            ("office", False): (1.46, 34.62, 2.03), ("office", True): (2.46, 29.53, 2.38), ("corridor", False): (1.63, 28.12, 2.25),
            ("corridor", True): (2.77, 29.27, 2.48), ("industrial", False): (2.31, 24.52, 2.06), ("industrial", True): (3.79, 21.01, 1.34)}[base["environment"], nlos]
        return 10 * alpha * log_d + beta + 10 * gamma * math.log10(f_ghz), nlos
    if law == "distance-coefficient":
        lf = base["floor_loss_db"]
        return 20 * math.log10(f_hz / 1e6) - 28 + base["coefficient"] * log_d + (lf[min(floors, len(lf)) - 1] if floors and lf else 0), True
    if law == "indoor-office":
        los = 32.4 + 17.3 * log_d + 20 * math.log10(f_ghz)
        return (max(los, 17.3 + 38.3 * log_d + 24.9 * math.log10(f_ghz)) if nlos else los), nlos
    if law == "indoor-factory":
        los = 31.84 + 21.5 * log_d + 19 * math.log10(f_ghz)
        rows = {"sl": 33 + 25.5 * log_d, "dl": max(18.6 + 35.7 * log_d, 33 + 25.5 * log_d), "sh": 32.4 + 23 * log_d, "dh": 33.63 + 21.9 * log_d}
        return (max(los, rows[base["clutter"]] + 20 * math.log10(f_ghz)) if nlos else los), nlos
    heavy = sum(c == "core" for c, is_floor in found if not is_floor)
    light = len(found) - floors - heavy
    term = floors ** ((floors + 2) / (floors + 1) - base.get("b", 0.46)) if floors else 0
    return free_space(f_hz, max(d, 1)) + light * base.get("light_db", 3.4) + heavy * base.get("heavy_db", 6.9) + term * base.get("floor_db", 18.3), True


def cut(values, position, whole_turn):
    n = len(values)
    k = min(int(position), n - 1 if whole_turn else n - 2)
    return values[k] + (position - k) * (values[(k + 1) % n] - values[k])


def antenna(plan, radio, to):
    pattern = next((a for a in plan["antennas"] if a["id"] == radio["antenna"]), {"pattern": "isotropic", "gain_dbi": 0})
    length = math.sqrt(sum(x * x for x in to))
    if pattern["pattern"] == "isotropic":
        return pattern["gain_dbi"]
    if pattern["pattern"] == "dipole":
        theta = math.acos(to[2] / length)
        field = math.cos(math.pi / 2 * math.cos(theta)) / math.sin(theta)
        return 2.15 + max(-30, 20 * math.log10(abs(field)))
    # Unit vectors of the turned antenna: forward, left, up.
    az, tilt = math.radians(radio["azimuth_deg"]), math.radians(radio["downtilt_deg"])
    forward = (math.sin(az) * math.cos(tilt), math.cos(az) * math.cos(tilt), -math.sin(tilt))
    left = (-math.cos(az), math.sin(az), 0)
    up = (math.sin(az) * math.sin(tilt), math.cos(az) * math.sin(tilt), math.cos(tilt))
    f, l, u = (sum(p * q for p, q in zip(axis, to)) / length for axis in (forward, left, up))
    vertical, horizontal = math.degrees(math.asin(max(-1, min(1, u)))), math.degrees(math.atan2(l, f))
    if pattern["pattern"] == "sector":
        fall_v, fall_h, peak = 12 * (vertical / pattern["beamwidth_v_deg"]) ** 2, 12 * (horizontal / pattern["beamwidth_h_deg"]) ** 2, pattern["gain_dbi"]
    else:
        v, h = pattern["vertical_dbi"], pattern["horizontal_dbi"]
        fall_v = max(v) - cut(v, (vertical + 90) / 180 * (len(v) - 1), False)
        fall_h = max(h) - cut(h, (-horizontal % 360) / 360 * len(h), True)
        peak = max(max(v), max(h))
    return peak - min(min(fall_v, 30) + min(fall_h, 30), 30)


def second(plan, cell, terminal):
    a, b = place(plan, cell), place(plan, terminal)
    found = crossings(plan, a, b)
    d = math.dist(a, b)
    base, holds = base_loss(plan, d, found)
    walls = 0 if holds or not plan["propagation"]["walls"] else sum(next(c for c in plan["constructions"] if c["id"] == name)["loss_db"] for name, _ in found)
    limit = plan["propagation"]["excess_loss_limit_db"]
    walls = walls if limit is None else min(walls, limit)
    there = tuple(y - x for x, y in zip(a, b))
    return (-(base + walls) + antenna(plan, cell, there) + antenna(plan, terminal, tuple(-x for x in there)) - cell["feeder_loss_db"] - terminal["feeder_loss_db"]
            - terminal["body_loss_db"])


faults, laws, compared = [], {}, 0
for seed in trials(400):
    plan = random_site(seed)
    got, _ = gains(plan)
    base = plan["propagation"]["base"]
    laws[base["law"]] = laws.get(base["law"], 0) + 1
    for terminal in plan["terminals"]:
        for cell in plan["cells"]:
            compared += 1
            faults += near(f"site {seed} {base} {cell['id']} {terminal['id']}", got[terminal["id"], cell["id"]], second(plan, cell, terminal), 1e-7)
tap.check(f"gains under every law are those of the second computation ({compared} pairs, {laws})", faults[:20])
tap.check("every law occurs", [law for law in ("free-space", "log-distance", "site-general", "distance-coefficient", "indoor-office", "indoor-factory", "multi-wall")
                               for fault in enough(laws.get(law, 0), 20)])

# Turned, moved and raised as a whole, no gain changes.
faults = []
for seed in trials(60):
    plan = random_site(seed)
    rng = random.Random(seed)
    angle, dx, dy = rng.uniform(0, 360), rng.uniform(-500, 500), rng.uniform(-500, 500)
    turned = copy.deepcopy(plan)

    def turn(x, y):
        a = math.radians(angle)  # clockwise
        return x * math.cos(a) + y * math.sin(a) + dx, -x * math.sin(a) + y * math.cos(a) + dy
    for storey in turned["storeys"]:
        storey["elevation_m"] += 100
        for wall in storey["walls"]:
            wall["points"] = [list(turn(*p)) for p in wall["points"]]
    for radio in turned["cells"] + turned["terminals"]:
        radio["x_m"], radio["y_m"] = turn(radio["x_m"], radio["y_m"])
        radio["azimuth_deg"] += angle
    before, after = gains(plan)[0], gains(turned)[0]
    faults += [fault for pair in before for fault in near(f"site {seed} {pair}", after[pair], before[pair], 1e-9)]
tap.check("turning and moving the whole plan changes no gain", faults[:20])

# Cells and terminals exchanged, the path is the same.
faults = []
for seed in trials(60):
    plan = random_site(seed)
    swapped = copy.deepcopy(plan)
    swapped["cells"] = [{k: v for k, v in t.items() if k not in ("target_down_db", "target_up_db", "body_loss_db")} for t in plan["terminals"]]
    swapped["terminals"] = [c | {"target_down_db": 0, "target_up_db": 0} for c in plan["cells"]]
    before, after = gains(plan)[0], gains(swapped)[0]
    body = {t["id"]: t["body_loss_db"] for t in plan["terminals"]}
    faults += [fault for t, c in before for fault in near(f"site {seed} {t} {c}", after[c, t], before[t, c] + body[t], 1e-9)]
tap.check("a path has the same gain both ways", faults[:20])

# Pairs outside what a law was made for: one line, with the count and a pair; `path` says it of its pair.
site = random_site(1)
site["propagation"] = {"base": {"law": "site-general", "environment": "office", "sight": "nlos"}, "walls": False}
site["carrier"]["frequency_mhz"] = 3750
for k, terminal in enumerate(site["terminals"]):
    terminal |= {"x_m": 10 * (k + 1), "y_m": 0, "height_m": 1, "storey": "S0"}
site["cells"] = site["cells"][:1]
site["cells"][0] |= {"x_m": 0, "y_m": 0, "height_m": 1, "storey": "S0"}
_, told = gains(site)
lines = [line for line in told.splitlines() if "site-general" in line]
tap.check("pairs out of range are told in one line", same("lines", len(lines), 1) + [w for w in ("1 pair lies", "C0, T3", "4 to 30 m", "nlos") if w not in told])
ran = run(program, "path", "-", "C0", "T3", plan=site)
tap.check("path says it of its pair", same("exit", ran.returncode, 0) + ([] if b"site-general (nlos)" in ran.stderr else [ran.stderr.decode()]))
ran = run(program, "path", "-", "C0", "T1", plan=site)
tap.check("and not of others", same("complaints", ran.stderr, b""))

# Chances under shadowing, against drawing it: correlated Gaussian paths at fixed powers.
rng = np.random.default_rng(5)
faults, compared = [], 0
for seed in range(12):
    direction = "up" if seed % 2 else "down"
    plan = random_site(seed + 50)
    plan["propagation"] |= {"base": {"law": "log-distance", "exponent": 3, "reference_m": 1}, "walls": True, "shadowing_db": 3, "correlation_m": 8, "excess_loss_limit_db": None}
    plan["carrier"]["sharing"] = "simultaneous" if seed % 3 == 0 else "orthogonal"
    for radio in plan["cells"] + plan["terminals"]:
        radio |= {"power_min_dbm": -60, "power_max_dbm": 30, "power_dbm": 10}
    answer = solve(program, plan, "--direction", direction, "--aim", "as-set")
    places = {r["id"]: place(plan, r) for r in plan["cells"] + plan["terminals"]}
    terminals, cells = [t["id"] for t in plan["terminals"]], [c["id"] for c in plan["cells"]]
    near_by = np.array([[math.exp(-math.dist(places[s], places[t]) / 8) for t in terminals] for s in terminals])
    root = np.linalg.cholesky(near_by + 1e-10 * np.eye(len(terminals)))
    draws = 40000
    common = root @ rng.standard_normal((len(terminals), draws))
    own = {c: root @ rng.standard_normal((len(terminals), draws)) for c in cells}
    x = {(t, c): 3 * (math.sqrt(0.5) * common[k] + math.sqrt(0.5) * own[c][k]) for k, t in enumerate(terminals) for c in cells}
    for link in answer["links"]:
        t, c = link["terminal"], link["cell"]
        heard = 10 ** (link["noise_dbm"] / 10) * np.ones(draws)
        for one in link["interferers"]:
            heard += 10 ** ((one["dbm"] + x[(t, one["id"]) if direction == "down" else (one["id"], c)]) / 10)
        sinr = link["signal_dbm"] + x[t, c] - 10 * np.log10(heard)
        drawn = float(np.mean(sinr >= link["target_db"]))
        compared += 1
        if abs(drawn - link["probability"]) > 0.05:
            faults.append(f"site {seed} {direction} {t}: {link['probability']} told, {drawn} drawn, margin {link['margin_db']}")
tap.check(f"chances are those of drawing, to first order ({compared} links)", faults + ([] if compared > 40 else ["too few"]))
tap.end()
