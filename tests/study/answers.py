"""What an answer must say in the corners of the job.  usage: answers.py UNDERTONE-CLI"""
import copy
import math
import pathlib
import sys

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
from tap import Tap, near, same, solve  # noqa: E402

program = sys.argv[1]
tap = Tap()
NOISE_DBM = 10 * math.log10(1.380649e-23 * 290 * 20e6 * 1e3)  # kTB, noise figure 0 dB


def plan(gains_db, sharing="orthogonal", cell=None, terminal=None, **carrier):
    """gains_db[t][c] relative to the noise: at 0 dBm a terminal alone has that SINR."""
    radio = {"storey": "S1", "x_m": 0, "y_m": 0, "height_m": 1, "power_dbm": 0, "power_min_dbm": -40, "power_max_dbm": 20, "power_step_db": 0,
             "noise_figure_db": 0}
    return {
        "undertone": 1, "carrier": {"frequency_mhz": 1000, "bandwidth_mhz": 20, "sharing": sharing} | carrier,
        "propagation": {"base": {"law": "free-space"}}, "constructions": [],
        "storeys": [{"id": "S1", "elevation_m": 0, "height_m": 3, "walls": []}],
        "antennas": [{"id": "six", "pattern": "isotropic", "gain_dbi": 6}],
        "cells": [radio | {"id": f"C{c + 1}"} | (cell or {}) for c in range(len(gains_db[0]))],
        "terminals": [radio | {"id": f"T{t + 1}", "target_down_db": 10, "target_up_db": 10} | (terminal or {})
                      for t in range(len(gains_db))],
        "measured_gains_db": {f"T{t + 1}": {f"C{c + 1}": value + NOISE_DBM for c, value in enumerate(row)}
                              for t, row in enumerate(gains_db)},
    }


def lin(db):
    return 10 ** (db / 10)


def db(ratio):
    return 10 * math.log10(ratio)


def consistent(answer, gain_db=0):
    """Every link's figures fit each other."""
    faults = []
    for link in answer["links"]:
        name = link["terminal"]
        parts = sum(lin(one["dbm"]) for one in link["interferers"])
        if link["interference_dbm"] is None:
            faults += same(f"{name} interferers", link["interferers"], [])
        else:
            faults += near(f"{name} interference", db(parts), link["interference_dbm"], 1e-9)
        heard = lin(link["noise_dbm"]) + parts
        faults += near(f"{name} sinr", link["sinr_db"], link["signal_dbm"] - db(heard) + gain_db, 1e-9)
        faults += near(f"{name} margin", link["margin_db"], link["sinr_db"] - link["target_db"], 1e-9)
        strengths = [one["dbm"] for one in link["interferers"]]
        faults += same(f"{name} order", strengths, sorted(strengths, reverse=True))
    return faults


pair = plan([[30, 10], [12, 28]])

# Two cells, by hand: p1 = (1e1/1e3)(1 + 1e1 p2), p2 = (1e1/10^2.8)(1 + 10^1.2 p1).
f12, f21, u1, u2 = 10 * lin(-20), 10 * lin(-16), 10 * lin(-30), 10 * lin(-28)
p1 = (u1 + f12 * u2) / (1 - f12 * f21)
p2 = (u2 + f21 * u1) / (1 - f12 * f21)
answer = solve(program, pair)
tap.check("two links by hand",
          near("p1", lin(answer["links"][0]["power_dbm"]), p1, 1e-9) + near("p2", lin(answer["links"][1]["power_dbm"]), p2, 1e-9)
          + near("radius", answer["spectral_radius"], math.sqrt(f12 * f21), 1e-9) + consistent(answer)
          + same("aim", answer["aim"], "least-power") + same("fallback", answer["fallback"], None))

for hold_db in (1, 3):
    held = solve(program, pair, "--hold", str(hold_db))
    tap.check(f"{hold_db} dB in hand: every margin is that, verdict and headroom stay",
              [f for link in held["links"] for f in near(link["terminal"], link["margin_db"], hold_db, 1e-7)]
              + near("headroom", held["headroom_db"], answer["headroom_db"], 1e-9) + same("verdict", held["verdict"], "met")
              + same("exit", held["exit"], 0))
held = solve(program, pair, "--hold", "100")
tap.check("more in hand than there is: equal margins, and it says so",
          same("fallback", held["fallback"], "equal-margin") + near("margin", held["links"][0]["margin_db"], held["headroom_db"], 1e-6)
          + ([] if any("headroom" in w for w in held["warnings"]) else ["no warning"]))
equal = solve(program, pair, "--aim", "equal-margin")
tap.check("equal margin: both margins are the headroom, one radio at its limit",
          [f for link in equal["links"] for f in near(link["terminal"], link["margin_db"], equal["headroom_db"], 1e-7)]
          + near("loudest", max(s["power_dbm"] for s in equal["transmitters"]), 20, 1e-5))

cut_off = plan([[30, 29], [29, 30]])
answer = solve(program, cut_off)
tap.check("two links that drown each other: interference-limited, equal margins instead",
          same("verdict", answer["verdict"], "interference-limited") + same("fallback", answer["fallback"], "equal-margin") + same("exit", answer["exit"], 1)
          + near("radius", answer["spectral_radius"], 10 * lin(-1), 1e-9)
          + [f for link in answer["links"] for f in near(link["terminal"], link["margin_db"], answer["headroom_db"], 1e-7)] + consistent(answer))

quiet = plan([[-15, -60]])
answer = solve(program, quiet)
tap.check("noise-limited: the link is named, 5 dB short at full power",
          same("verdict", answer["verdict"], "noise-limited") + same("group", answer["limiting_group"], ["T1"])
          + near("margin", answer["links"][0]["margin_db"], -5, 1e-6) + near("headroom", answer["headroom_db"], -5, 1e-6))

level = plan([[30, -60]], terminal={"level_down_dbm": NOISE_DBM + 55, "level_up_dbm": NOISE_DBM + 45})
answer = solve(program, level)
tap.check("a level out of reach: level-limited, no headroom",
          same("verdict", answer["verdict"], "level-limited") + same("group", answer["limiting_group"], ["T1"])
          + same("headroom", answer["headroom_db"], None) + near("power", answer["links"][0]["power_dbm"], 20, 1e-6))
answer = solve(program, level, "--direction", "up")
tap.check("a level within reach sets the power",
          same("verdict", answer["verdict"], "met") + near("power", answer["links"][0]["power_dbm"], 15, 1e-6)
          + near("level", answer["links"][0]["level_target_dbm"], NOISE_DBM + 45, 1e-9) + near("margin", answer["links"][0]["margin_db"], 35, 1e-6)
          + near("headroom", answer["headroom_db"], 40, 1e-6))

off = copy.deepcopy(pair)
off["cells"][0]["on"] = False
off["terminals"][0]["cell"] = "C1"
answer = solve(program, off)
orphan, other = answer["links"]
tap.check("a terminal whose named cell is off: outside the system, first in the group",
          same("verdict", answer["verdict"], "noise-limited") + same("cell", orphan["cell"], None) + same("group", answer["limiting_group"], ["T1"])
          + [f for key in ("power_dbm", "sinr_db", "margin_db", "signal_dbm", "noise_dbm", "interference_dbm") for f in same(key, orphan[key], None)]
          + same("interferers", orphan["interferers"], []) + near("the other", other["margin_db"], answer["headroom_db"], 1e-6)
          + same("senders", [s["id"] for s in answer["transmitters"]], ["C2"]))

nobody = copy.deepcopy(pair)
for terminal in nobody["terminals"]:
    terminal["target_down_db"] = None
answer = solve(program, nobody)
tap.check("no live link: met, null, exit 0, idle cells at their minimum",
          same("verdict", answer["verdict"], "met") + same("headroom", answer["headroom_db"], None) + same("radius", answer["spectral_radius"], None)
          + same("exit", answer["exit"], 0) + same("links", answer["links"], [])
          + same("senders", [(s["id"], s["power_dbm"]) for s in answer["transmitters"]], [("C1", -40), ("C2", -40)]))
empty = copy.deepcopy(pair)
empty["cells"], empty["terminals"], empty["measured_gains_db"] = [], [], {}
answer = solve(program, empty)
tap.check("an empty plan", same("verdict", answer["verdict"], "met") + same("exit", answer["exit"], 0) + same("senders", answer["transmitters"], []))

idle = plan([[30, 20]], cell={"power_min_dbm": -10, "activity": 0.5})
answer = solve(program, idle)
tap.check("an idle cell sends its minimum with its own activity",
          same("interferers", [one["id"] for one in answer["links"][0]["interferers"]], ["C2"])
          + near("strength", answer["links"][0]["interference_dbm"], NOISE_DBM + 20 - 10 + db(0.5), 1e-9) + consistent(answer))
loud_idle = plan([[30, 30]], cell={"power_min_dbm": 15})
loud_idle["cells"][0]["power_min_dbm"] = -40
loud_idle["terminals"][0]["cell"] = "C1"
answer = solve(program, loud_idle)
tap.check("an idle cell that is too loud: minimum-limited", same("verdict", answer["verdict"], "minimum-limited"))

limited = plan([[30, 10], [12, 28]], cell={"antenna": "six", "feeder_loss_db": 1}, eirp_limit_dbm=-12.6)
answer = solve(program, limited)
tap.check("an EIRP limit counts antenna and feeder: power-limited",
          same("verdict", answer["verdict"], "power-limited") + near("EIRP", max(s["eirp_dbm"] for s in answer["transmitters"]), -12.6, 1e-5)
          + near("power", max(s["power_dbm"] for s in answer["transmitters"]), -17.6, 1e-5))
answer = solve(program, limited, "--aim", "as-set")
tap.check("as set above the EIRP limit is warned of",
          ([] if sum("EIRP" in w for w in answer["warnings"]) == 2 else [answer["warnings"]]) + same("power", answer["links"][0]["power_dbm"], 0))
below = plan([[30, 10]], cell={"antenna": "six"}, eirp_limit_dbm=-50)
answer = solve(program, below)
tap.check("a minimum above the EIRP limit: nothing keeps both",
          same("verdict", answer["verdict"], "noise-limited") + same("headroom", answer["headroom_db"], None)
          + same("fallback", answer["fallback"], "equal-margin"))

channels = plan([[30, 25], [25, 30]], channels=3, channel_isolation_db=[20, 40])
channels["cells"][1]["channel"] = 2
answer = solve(program, channels)
tap.check("isolation between channels",
          near("radius", answer["spectral_radius"], 10 * lin(-5 - 20), 1e-9) + consistent(answer))
channels["cells"][1]["channel"] = 3
tap.check("the isolation two channels apart", near("radius", solve(program, channels)["spectral_radius"], 10 * lin(-45), 1e-9))
channels["carrier"]["channel_isolation_db"] = []
answer = solve(program, channels)
tap.check("infinite isolation: no interferers at all",
          same("radius", answer["spectral_radius"], 0) + [f for link in answer["links"] for f in same("interference", link["interference_dbm"], None)]
          + consistent(answer))

shared = plan([[30, 5], [27, 8]], "simultaneous", processing_gain_db=12, downlink_orthogonality=0.5)
for terminal in shared["terminals"]:
    terminal["cell"] = "C1"
for direction in ("down", "up"):
    for aim in ("least-power", "equal-margin", "as-set"):
        answer = solve(program, shared, "--direction", direction, "--aim", aim)
        tap.check(f"simultaneous {direction}, {aim}: figures fit each other", consistent(answer, 12) + same("verdict", answer["verdict"], "met"))
answer = solve(program, shared, "--aim", "as-set")
tap.check("as set, a cell shares its power equally",
          [f for link in answer["links"] for f in near("share", link["power_dbm"], -db(2), 1e-9)]
          + same("idle as set", [s["power_dbm"] for s in answer["transmitters"]], [0, 0]))

worst = plan([[30, 5], [30, 20], [0, 30]])
for t, name in enumerate(("C1", "C1", "C2")):
    worst["terminals"][t]["cell"] = name
answer = solve(program, worst, "--direction", "up")
heard = answer["links"][2]
tap.check("orthogonal uplink: of another cell's terminals the worst is heard",
          same("worst", [one["id"] for one in heard["interferers"]], ["T2"]) + consistent(answer))

same_gain = plan([[20, 20]])
tap.check("equal gains: the first cell in the file serves", same("cell", solve(program, same_gain)["links"][0]["cell"], "C1"))

steep = solve(program, pair, "--aim", "as-set")
tap.check("as set says nothing else about the plan than least powers do",
          [f for key in ("verdict", "headroom_db", "spectral_radius") for f in same(key, steep[key], solve(program, pair)[key])])
tap.end()
