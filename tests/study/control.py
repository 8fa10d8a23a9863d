"""The power control loop, against the same loop written here and against what theory says of it.  usage: control.py UNDERTONE-CLI"""
import json
import pathlib
import random
import sys

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
sys.path.insert(0, str(pathlib.Path(__file__).resolve().parent))
from oracle import Case, db, lin, random_plan  # noqa: E402
from tap import Tap, enough, near, run, same, solve, trials  # noqa: E402

program = sys.argv[1]
tap = Tap()


def control(plan, direction, *options):
    ran = run(program, "control", "-", "--format", "json", "--direction", direction, *options, plan=plan)
    if ran.returncode != 0:
        raise RuntimeError(ran.stderr.decode())
    return json.loads(ran.stdout)


def needs(case, powers):
    """What every sender asks for at these powers, straight from the rows of the definitions."""
    names, targets, others, _ = case.rows(minima=False)
    values = dict(powers)
    for i, _, weights in others:
        if isinstance(i, tuple):
            values[i] = max([values.get(i, 0)] + [w * values[j] for j, w in weights.items()])
    asked = {}
    for i, constant, weights in targets + [row for row in others if not isinstance(row[0], tuple)]:
        asked[i] = max(asked.get(i, 0), constant + sum(w * values[j] for j, w in weights.items()))
    return asked


def usable(seed):
    """A plan and its senders' limits (mW); simultaneous downlinks are left out: sums are limited there."""
    plan, direction = random_plan(seed)
    case = Case(plan, direction)
    if not case.live or (case.down and case.simultaneous):
        return None
    names = sorted(set(case.serving.values())) if case.down else list(case.live)
    radios = case.cells if case.down else case.terminals
    limits = {n: case.limit(radios[n]) for n in names}
    minima = {n: min(lin(radios[n]["power_min_dbm"]), limits[n]) for n in names}
    return plan, direction, case, names, radios, limits, minima


faults, ends, n_met, n_plans = [], [], 0, 0
for seed in trials(300):
    picked = usable(seed)
    if picked is None:
        continue
    plan, direction, case, names, radios, limits, minima = picked
    got = control(plan, direction, "--rounds", "12")
    n_plans += 1
    faults += same(f"plan {seed} senders", sorted(got["senders"]), sorted(names))
    powers = {n: min(max(lin(radios[n]["power_dbm"]), minima[n]), limits[n]) for n in names}
    for row in range(13):
        told = dict(zip(got["senders"], got["rows"][row]["power_dbm"]))
        faults += [fault for n in names for fault in near(f"plan {seed} {direction} row {row} {n}", told[n], db(powers[n]), 1e-8)]
        if faults:
            break
        asked = needs(case, powers)
        powers = {n: min(max(asked[n], minima[n]), limits[n]) for n in names}
    # Where it ends, by going on and on.
    for _ in range(30000):
        asked = needs(case, powers)
        after = {n: min(max(asked[n], minima[n]), limits[n]) for n in names}
        moved = max(abs(after[n] / powers[n] - 1) for n in names)
        powers = after
        if moved < 1e-15:
            break
    else:
        continue  # too near the edge for plain iteration
    end = dict(zip(got["senders"], got["end_dbm"]))
    ends += [fault for n in names for fault in near(f"plan {seed} {direction} end {n}", end[n], db(powers[n]), 1e-6)]
    answer = solve(program, plan, "--direction", direction)
    n_met += got["end_meets"]
    if not case.orphans:
        ends += same(f"plan {seed} end meets all", got["end_meets"], answer["verdict"] in ("met", "minimum-limited") and
                     all(asked[n] <= limits[n] * (1 + 1e-9) for n in names))
    if answer["verdict"] == "met" and not case.orphans:
        least = {(link["cell"] if case.down else link["terminal"]): link["power_dbm"] for link in answer["links"]}
        ends += [fault for n in names for fault in near(f"plan {seed} {direction} end {n}, least power", end[n], least[n], 1e-6)]
tap.check(f"exact rounds are those of the definitions ({n_plans} plans)", faults[:20] + enough(n_plans, 150))
tap.check(f"they end where plain iteration ends, with the least powers where all can be met ({n_met})", ends[:20] + enough(n_met, 40))

# The distance from the end shrinks as predicted.
faults, compared = [], 0
for seed in trials(400):
    picked = usable(seed)
    if picked is None:
        continue
    plan, direction = picked[:2]
    delay = seed % 3
    got = control(plan, direction, "--rounds", "400", "--delay", str(delay))
    predicted, observed = got["predicted_db_per_round"], got["observed_db_per_round"]
    if predicted is None or observed is None or predicted > 6 or predicted * 400 < 150:
        continue
    compared += 1
    faults += near(f"plan {seed} {direction} delay {delay}", observed, predicted, 0.12 * predicted + 0.05)
tap.check(f"the distance shrinks as the spectral radius says ({compared} plans)", faults + enough(compared, 20))

# Up and down by steps: in the end within the band, where the headroom allows for it.
faults, held = [], 0
for seed in trials(300):
    picked = usable(seed)
    if picked is None:
        continue
    plan, direction = picked[:2]
    rng = random.Random(seed)
    step, delay, error = rng.choice([0.25, 0.5, 1]), rng.choice([0, 1]), rng.choice([0, 0.3])
    got = control(plan, direction, "--rule", "steps", "--step", str(step), "--delay", str(delay), "--error", str(error), "--rounds", "500", "--seed", str(seed))
    band = (delay + 1) * step + error
    faults += near(f"plan {seed} band", got["band_db"], band, 1e-12)
    headroom = solve(program, plan, "--direction", direction)["headroom_db"]
    if headroom is not None and abs(headroom - band) > 1e-6 and all(t["level_down_dbm"] is None and t["level_up_dbm"] is None for t in plan["terminals"]):
        faults += same(f"plan {seed} holds", got["band_holds"], headroom >= band)
    if not got["band_holds"]:
        continue
    held += 1
    low, high = got["band_low_dbm"], got["band_high_dbm"]
    for row in got["rows"][-150:]:
        faults += [f"plan {seed}: {got['senders'][k]} at {p}, band {low[k]} to {high[k]}" for k, p in enumerate(row["power_dbm"])
                   if not low[k] - 1e-9 <= p <= high[k] + 1e-9]
        faults += [f"plan {seed}: {link['terminal']} at {sinr}, target {link['target_db']}" for link, sinr in zip(got["links"], row["sinr_db"])
                   if sinr < link["target_db"] - 2 * (delay + 1) * step - error - 1e-9]
    again = control(plan, direction, "--rule", "steps", "--step", str(step), "--delay", str(delay), "--error", str(error), "--rounds", "500", "--seed", str(seed))
    faults += same(f"plan {seed} again", again == got, True)
tap.check(f"steps stay in the band ({held} plans)", faults[:20] + enough(held, 25))

# Simultaneous downlink: no cell ever sends more than it can.
faults, compared = [], 0
for seed in trials(1, 200)[::4]:
    plan, direction = random_plan(seed)
    case = Case(plan, direction)
    if not case.live:
        continue
    got = control(plan, direction, "--rounds", "60", "--start", "most")
    compared += 1
    for row in got["rows"]:
        sums = {}
        for t, p in zip(got["senders"], row["power_dbm"]):
            sums[case.serving[t]] = sums.get(case.serving[t], 0) + lin(p)
        faults += [f"plan {seed}: {c} sends {db(s)} dBm" for c, s in sums.items() if s > case.limit(case.cells[c]) * (1 + 1e-9)]
    answer = solve(program, plan, "--direction", direction)
    if not case.orphans:
        faults += same(f"plan {seed} end known", got["end_dbm"] is not None, answer["verdict"] == "met" or all(
            list(case.serving.values()).count(c) == 1 for c in case.serving.values()))
tap.check(f"simultaneous downlink: sums are kept ({compared} plans)", faults[:20] + enough(compared, 25))
tap.end()
