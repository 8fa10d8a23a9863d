"""The example plans give the answers they are there for.  usage: examples.py UNDERTONE-CLI EXAMPLES_FOLDER

The figures come from an independent computation of the same invented sites (least powers also by linear programme), to the digits given here.
"""
import copy
import json
import pathlib
import sys

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
from tap import Tap, near, same, solve  # noqa: E402

program, folder = sys.argv[1], pathlib.Path(sys.argv[2])
tap = Tap()


def example(name):
    return json.loads((folder / f"{name}.undertone").read_text(encoding="utf-8"))


def margins(answer):
    return {link["terminal"]: link["margin_db"] for link in answer["links"]}


def powers(answer):
    return {sender["id"]: sender["power_dbm"] for sender in answer["transmitters"]}


def changed(plan, change):
    other = copy.deepcopy(plan)
    change(other)
    return other


def turn_down(by_db):
    def change(plan):
        for radio in plan["cells"] + plan["terminals"]:
            radio["power_dbm"] -= by_db
            radio["power_min_dbm"] = min(radio["power_min_dbm"], radio["power_dbm"])
    return change


def switch_off(cell):
    def change(plan):
        next(c for c in plan["cells"] if c["id"] == cell)["on"] = False
    return change


# Cold store: full power fails, least powers succeed.
store = example("cold-store")
as_set = solve(program, store, "--aim", "as-set")
short = {t: m for t, m in margins(as_set).items() if m < -1e-6}
tap.check("cold store, downlink as set: T4 and T5 fall short",
          same("short", sorted(short), ["T4", "T5"]) + near("T4", short.get("T4"), -4.3, 0.06) + near("T5", short.get("T5"), -3.4, 0.06)
          + same("exit", as_set["exit"], 1) + same("verdict", as_set["verdict"], "met"))
for by_db, lacks_db in ((6, 4.25), (24, 4.51)):
    turned = solve(program, changed(store, turn_down(by_db)), "--aim", "as-set")
    tap.check(f"cold store, all turned down alike by {by_db} dB: T4 stays short",
              near("T4", margins(turned)["T4"], -lacks_db, 0.006))
stepped = solve(program, store)
tap.check("cold store, downlink: met on the cells' 1 dB steps with 5, 0, 5, 0 dBm", same("verdict", stepped["verdict"], "met")
          + [fault for cell, dbm in (("C1", 5), ("C2", 0), ("C3", 5), ("C4", 0)) for fault in near(cell, powers(stepped)[cell], dbm, 1e-9)])


def continuous(plan):
    for radio in plan["cells"] + plan["terminals"]:
        radio["power_step_db"] = 0


down = solve(program, changed(store, continuous))
tap.check("cold store, downlink: least powers without steps",
          same("verdict", down["verdict"], "met") + same("exit", down["exit"], 0) + near("radius", down["spectral_radius"], 0.705, 6e-4)
          + near("headroom", down["headroom_db"], 1.517, 6e-4)
          + [fault for cell, dbm in (("C1", 4.8), ("C2", 0), ("C3", 4.6), ("C4", 0)) for fault in near(cell, powers(down)[cell], dbm, 0.06)])
up_as_set, up = solve(program, store, "--direction", "up", "--aim", "as-set"), solve(program, store, "--direction", "up")
tap.check("cold store, uplink: T7 short at full power, met with least powers",
          near("T7", margins(up_as_set)["T7"], -5.5, 0.06) + same("verdict", up["verdict"], "met") + near("headroom", up["headroom_db"], 4.501, 6e-4))


def empty_racks(plan):
    next(c for c in plan["constructions"] if c["id"] == "rack")["loss_db"] = 0


empty = solve(program, changed(store, empty_racks))
tap.check("cold store, racks empty: interference-limited",
          same("verdict", empty["verdict"], "interference-limited") + near("headroom", empty["headroom_db"], -4.7, 0.06))
for cell, verdict, headroom_db in (("C4", "met", 1.9), ("C1", "interference-limited", -4.1), ("C2", "interference-limited", -1.9),
                                   ("C3", "interference-limited", -3.5)):
    off = solve(program, changed(store, switch_off(cell)))
    tap.check(f"cold store, {cell} off: {verdict}",
              same("verdict", off["verdict"], verdict) + near("headroom", off["headroom_db"], headroom_db, 0.06))

# Clinic: one channel cannot do it, two can.
one, two = example("clinic-one-channel"), example("clinic-two-channels")
for plan, name, direction, verdict, radius, headroom_db in (
        (one, "one channel", "down", "interference-limited", 4.340, -6.375), (one, "one channel", "up", "interference-limited", 2.181, -3.387),
        (two, "two channels", "down", "met", 0.559, 2.529), (two, "two channels", "up", "met", None, 5.528)):
    answer = solve(program, plan, "--direction", direction)
    tap.check(f"clinic, {name}, {direction}: {verdict}",
              same("verdict", answer["verdict"], verdict) + near("headroom", answer["headroom_db"], headroom_db, 6e-4)
              + (near("radius", answer["spectral_radius"], radius, 6e-4) if radius is not None else []))
tap.check("clinic, two channels, downlink: every cell at its lowest",
          [fault for cell, dbm in powers(solve(program, two)).items() for fault in near(cell, dbm, -10, 1e-9)])

for direction, total, dropped in (("down", 3, {"T4", "T12"}), ("up", 1, set())):
    answer = solve(program, one, "--direction", direction, "--aim", "fewest-dropped")
    rest = set(answer["dropped"]) - dropped
    tap.check(f"clinic, one channel, {direction}: fewest dropped",
              same("bounds", answer["drop_bounds"], [total, total]) + same("proved", answer["drop_proved"], True) + same("these", set(answer["dropped"]) >= dropped, True)
              + same("and one of", len(rest) == 1 and rest <= ({"T3", "T5", "T6"} if direction == "down" else {"T3", "T4"}), True))

# Farm: near and far, all at once.
farm = example("farm")
for by_db in (0, 10, 20, 30):
    equal = solve(program, changed(farm, turn_down(by_db)), "--direction", "up", "--aim", "as-set")
    short = [t for t, m in margins(equal).items() if m < -1e-6]
    tap.check(f"farm, uplink, all alike, {by_db} dB down: ten of twelve short",
              same("short", len(short), 10) + (near("T12", margins(equal)["T12"], -32.2, 0.06) if by_db == 0 else []))
up = solve(program, farm, "--direction", "up")
tap.check("farm, uplink: met from -28 to +7.8 dBm",
          same("verdict", up["verdict"], "met") + near("radius", up["spectral_radius"], 0.694, 6e-4) + near("headroom", up["headroom_db"], 1.584, 6e-4)
          + near("least", min(powers(up).values()), -28, 1e-6) + near("most", max(powers(up).values()), 7.8, 0.06))
down = solve(program, farm)
tap.check("farm, downlink: met, and the sum of the cell below its minimum is warned of",
          same("verdict", down["verdict"], "met") + near("sum", powers(down)["C1"], -20.9, 0.06)
          + ([] if any("C1" in w and "power_min_dbm" in w for w in down["warnings"]) else [f"warnings: {down['warnings']}"]))

# Radios that cannot whisper; a pad heals it.
loud = example("farm-loud-radios")
answer = solve(program, loud, "--direction", "up")
tap.check("farm with loud radios: minimum-limited",
          same("verdict", answer["verdict"], "minimum-limited") + near("headroom", answer["headroom_db"], -0.863, 6e-4))
for pad_db, headroom_db in ((3, 0.48), (6, 1.36), (10, 1.58)):
    def pad(plan, pad_db=pad_db):
        for terminal in plan["terminals"]:
            if terminal["id"] in ("T1", "T4"):
                terminal["feeder_loss_db"] += pad_db
    answer = solve(program, changed(loud, pad), "--direction", "up")
    tap.check(f"farm with loud radios, {pad_db} dB pads on T1 and T4: met",
              same("verdict", answer["verdict"], "met") + near("headroom", answer["headroom_db"], headroom_db, 6e-3))

pads = [(r["transmitters"][0]["id"], r["by_db"]) for r in solve(program, loud, "--direction", "up")["remedies"] if r["kind"] == "pads"]
tap.check("farm with loud radios: attenuators are among the remedies", same("pads", pads, [("T1", 6), ("T4", 6)]))

# The smallest plan, used throughout the docs.
rooms = example("two-rooms")
tap.check("two rooms: as set one terminal is short, least powers meet both",
          same("as set", solve(program, rooms, "--aim", "as-set")["exit"], 1) + same("least", solve(program, rooms)["verdict"], "met"))
tap.end()
