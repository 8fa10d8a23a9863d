"""Remedies, each tried on the plan file itself, and those that exhaustive trial finds.  usage: remedies.py UNDERTONE-CLI"""
import copy
import pathlib
import random
import sys

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent))
from oracle import random_plan  # noqa: E402
from tap import Tap, enough, near, same, solve, trials  # noqa: E402

program = sys.argv[1]
tap = Tap()


def edited(plan, change):
    other = copy.deepcopy(plan)
    change(other, {r["id"]: r for r in other["cells"]}, {r["id"]: r for r in other["terminals"]})
    return other


def applied(plan, direction, remedy, by_db):
    """What the sentence says, done by hand."""
    key = "target_down_db" if direction == "down" else "target_up_db"
    kind, terminal, cell = remedy["kind"], remedy["terminal"], remedy["cell"]

    def change(other, cells, terminals):
        senders = cells if direction == "down" else terminals
        if kind == "lower-targets":
            for t in terminals.values():
                if t[key] is not None:
                    t[key] -= by_db
        elif kind == "lower-target":
            terminals[terminal][key] -= by_db
        elif kind == "drop-link":
            terminals[terminal]["on"] = False
        elif kind == "other-cell":
            terminals[terminal]["cell"] = cell
        elif kind == "leave-out-cell":
            cells[cell]["on"] = False
            for t in terminals.values():
                t["cell"] = None if t["cell"] == cell else t["cell"]
        elif kind == "weaken-path":
            other["measured_gains_db"][terminal][cell] -= by_db
        elif kind == "raise-limits":
            for one in remedy["transmitters"]:
                senders[one["id"]]["power_max_dbm"] = one["to_dbm"] - (0 if by_db is None else by_db)
        elif kind == "pads":
            for one in remedy["transmitters"]:
                senders[one["id"]]["feeder_loss_db"] = senders[one["id"]].get("feeder_loss_db", 0) + by_db
                # Typed-in gains don't know of the attenuator.
                for t, row in other["measured_gains_db"].items():
                    for c in row:
                        row[c] -= by_db if one["id"] in (t if direction == "up" else c,) else 0
        else:
            raise RuntimeError(kind)
    return edited(plan, change)


def stepped_plan(seed):
    plan, direction = random_plan(seed)
    rng = random.Random(seed)
    if rng.random() < 0.3:
        for radio in plan["cells"] + plan["terminals"]:
            radio["power_step_db"] = rng.choice([0, 1, 2])
    return plan, direction


faults, seen = [], {}
for seed in trials(260):
    plan, direction = stepped_plan(seed)
    answer = solve(program, plan, "--direction", direction)
    if answer["verdict"] == "met":
        faults += same(f"plan {seed} met", answer["remedies"], [])
        continue
    for remedy in answer["remedies"]:
        seen[remedy["kind"]] = seen.get(remedy["kind"], 0) + 1
        healed = solve(program, applied(plan, direction, remedy, remedy["by_db"]), "--direction", direction)
        what = f"plan {seed} {direction}: {remedy['text']}"
        if remedy["kind"] != "pads":  # measured gains: the program's own pads change nothing, so none is told
            faults += same(what, healed["verdict"], "met")
            if healed["verdict"] == "met" and remedy["headroom_db"] is not None:
                faults += near(what, healed["headroom_db"], remedy["headroom_db"], 1e-6)
        # A little less does not do.
        if remedy["kind"] in ("lower-targets", "lower-target", "weaken-path") and remedy["by_db"] > 1e-3:
            less = solve(program, applied(plan, direction, remedy, remedy["by_db"] - 1e-4), "--direction", direction)
            if less["verdict"] == "met":
                faults.append(f"{what}, but less would do")
        if remedy["kind"] == "raise-limits":
            less = solve(program, applied(plan, direction, remedy, 1e-4), "--direction", direction)
            if less["verdict"] == "met":
                faults.append(f"{what}, but lower limits would do")
    # What the list of single links and cells must hold.
    best = {"drop-link": [r["terminal"] for r in answer["remedies"] if r["kind"] == "drop-link"],
            "leave-out-cell": [r["cell"] for r in answer["remedies"] if r["kind"] == "leave-out-cell"]}
    for kind, names, got in (("drop-link", [link["terminal"] for link in answer["links"]], best["drop-link"]),
                             ("leave-out-cell", [c["id"] for c in plan["cells"] if c["on"]], best["leave-out-cell"])):
        works = [n for n in names if solve(program, applied(plan, direction, {"kind": kind, "terminal": n, "cell": n}, None), "--direction", direction)["verdict"] == "met"]
        if len(got) != min(len(works), 5) or not set(got) <= set(works):
            faults.append(f"plan {seed} {direction} {kind}: {got}, exhaustive trial finds {works}")
tap.check(f"remedies heal, no less does, and single links and cells are all found ({seen})", faults)
tap.check("every kind occurs", [f"{k}: {fault}" for k in ("lower-targets", "lower-target", "drop-link", "other-cell", "leave-out-cell", "weaken-path", "raise-limits") for fault in enough(seen.get(k, 0), 3)])
tap.end()
