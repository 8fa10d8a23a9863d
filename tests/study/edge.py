"""The limiting group and its blame, against finite differences and Perron vectors of numpy.  usage: edge.py UNDERTONE-CLI"""
import copy
import pathlib
import sys

import numpy as np

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent))
from oracle import Case, db, random_plan  # noqa: E402
from tap import Tap, enough, same, solve, trials  # noqa: E402

program = sys.argv[1]
tap = Tap()
STEP_DB = 1e-4


def figure_db(answer):
    """What the edge is about: the headroom or, at the edge of interference, the spectral radius."""
    return -db(answer["spectral_radius"]) if answer["edge"]["set_by"] == "interference" else answer["headroom_db"]


def moved(plan, direction, change):
    """Change of that figure a dB, from both sides; None where it has a kink, or the edge changes its kind."""
    slopes = []
    base = solve(program, plan, "--direction", direction)
    for step in (-STEP_DB, STEP_DB):
        other = copy.deepcopy(plan)
        change(other, step)
        answer = solve(program, other, "--direction", direction)
        if answer["edge"] is None or answer["edge"]["set_by"] != base["edge"]["set_by"]:
            return None
        slopes.append((figure_db(answer) - figure_db(base)) / step)
    return sum(slopes) / 2 if abs(slopes[0] - slopes[1]) < 2e-3 else None


def louder(terminal, cell):
    def change(plan, step):
        plan["measured_gains_db"][terminal][cell] += step
    return change


faults, compared, kinds = [], 0, {"interference": 0, "limit": 0}
chain_faults, noise_compared = [], 0
for seed in trials(400):
    plan, direction = random_plan(seed)
    answer = solve(program, plan, "--direction", direction)
    edge = answer["edge"]
    if edge is None:
        if answer["headroom_db"] is not None and answer["links"] and any(link["cell"] for link in answer["links"]):
            faults.append(f"plan {seed}: a headroom without an edge")
        continue
    kinds[edge["set_by"]] += 1
    down = direction == "down"
    serving = {link["terminal"]: link["cell"] for link in answer["links"]}
    total = edge["noise_part"] + sum(b["part"] for b in edge["blame"])
    if not 0.9 < total < 1 + 1e-6:
        faults.append(f"plan {seed}: parts add up to {total}")
    if any(a["part"] < b["part"] for a, b in zip(edge["blame"], edge["blame"][1:])):
        faults.append(f"plan {seed}: blame is not sorted")
    if edge["set_by"] == "interference" and edge["noise_part"] != 0:
        faults.append(f"plan {seed}: noise at the edge of interference")
    # What one path contributes: of all links that hear it at this receiver.
    paths = {}
    for b in edge["blame"]:
        pair = (b["terminal"], b["because_of"]) if down else (b["because_of"], serving[b["terminal"]])
        paths[pair] = paths.get(pair, 0) + b["part"]
    for (terminal, cell), part in list(paths.items())[:2]:
        if serving.get(terminal) == cell:
            continue  # the link's own path: its signal changes too
        slope = moved(plan, direction, louder(terminal, cell))
        if slope is None or any(t["cell"] is None and serving.get(t["id"]) not in (None, cell) and
                                abs(plan["measured_gains_db"][t["id"]][cell] - plan["measured_gains_db"][t["id"]][serving[t["id"]]]) < 1e-3
                                for t in plan["terminals"]):
            continue
        compared += 1
        if abs(slope + part) > 4e-3:
            faults.append(f"plan {seed} {direction}: 1 dB on {terminal} - {cell} moves the edge by {slope}, blamed for {part}")
    chain = edge["chain"]
    if edge["at_limit"] is not None:
        chain_faults += same(f"plan {seed} chain begins at the limit", chain[0]["transmitter"] if chain else None, edge["at_limit"])
    chain_faults += [f"plan {seed}: broken chain" for a, b in zip(chain, chain[1:]) if a["because_of"] != b["transmitter"]]

    # One dB more for the radio at its limit helps by the part of noise, where no radio stands at a floor and no cell is idle.
    free = copy.deepcopy(plan)
    free["carrier"]["eirp_limit_dbm"] = None
    for radio in free["cells"] + free["terminals"]:
        radio |= {"power_min_dbm": -390}
    for terminal in free["terminals"]:
        terminal |= {"level_down_dbm": None, "level_up_dbm": None}
    answer = solve(program, free, "--direction", direction)
    at_limit, used = (answer["edge"] or {}).get("at_limit"), {link["cell"] for link in answer["links"]}
    if at_limit is not None and (not down or all(c["id"] in used or not c["on"] for c in free["cells"])):
        def more(other, step):
            for radio in other["cells" if down else "terminals"]:
                radio["power_max_dbm"] += step if radio["id"] == at_limit else 0
        slope = moved(free, direction, more)
        if slope is not None:
            noise_compared += 1
            if abs(slope - answer["edge"]["noise_part"]) > 4e-3:
                chain_faults.append(f"plan {seed} {direction}: 1 dB more for {at_limit} helps by {slope}, noise has {answer['edge']['noise_part']}")
tap.check(f"blame is how far 1 dB on the path moves the edge ({compared} paths, {kinds})", faults + enough(compared, 100))
tap.check(f"chains begin at the radio at its limit and hang together; 1 dB more for it helps by the part of noise ({noise_compared})",
          chain_faults + enough(noise_compared, 80))


def perron(case):
    """Involvement y_i x_i of each link of a simultaneous case, from numpy's eigenvectors."""
    names, targets, _, _ = case.rows(minima=False, idle=False)
    index = {n: i for i, n in enumerate(names)}
    f = np.zeros((len(names), len(names)))
    for i, _, weights in targets:
        for j, w in weights.items():
            f[index[i], index[j]] = w
    values, right = np.linalg.eig(f)
    other, left = np.linalg.eig(f.T)
    x, y = abs(right[:, np.argmax(values.real)].real), abs(left[:, np.argmax(other.real)].real)
    return {n: x[index[n]] * y[index[n]] / (x @ y) for n in names}


faults, compared = [], 0
for seed in trials(1, 400)[::2]:
    plan, direction = random_plan(seed)
    answer = solve(program, plan, "--direction", direction)
    if answer["verdict"] != "interference-limited":
        continue
    involved = perron(Case(plan, direction))
    order = sorted((t for t, v in involved.items() if v > 1.05e-3), key=lambda t: -involved[t])
    got = answer["limiting_group"]
    compared += 1
    faults += [f"plan {seed}: {t} is missing, involved by {involved[t]}" for t in order if t not in got]
    faults += [f"plan {seed}: {t} should not be there, involved by {involved[t]}" for t in got if involved[t] < 0.95e-3]
    faults += [f"plan {seed}: {got} is not sorted by involvement" for a, b in zip(got, got[1:]) if involved[a] < involved[b] * (1 - 1e-4)]
tap.check(f"simultaneous sharing: the limiting group is who the Perron vectors name ({compared} plans)", faults + enough(compared, 20))
tap.end()
