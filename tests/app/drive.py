"""Drives the desktop program from outside, as a user would: pointer, keys, drag and drop, actions.

usage: drive.py UNDERTONE UNDERTONE-CLI EXAMPLES_FOLDER   (on a display and a session bus of its own: tests/xvfb.sh, dbus-run-session)
"""
import json
import os
import pathlib
import re
import subprocess
import sys
import tempfile
import time

import gi

gi.require_version("Atspi", "2.0")
from gi.repository import Atspi, Gio, GLib  # noqa: E402

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
from tap import Tap, run, same  # noqa: E402

program, cli, examples = sys.argv[1], sys.argv[2], pathlib.Path(sys.argv[3])
ID, PATH = "io.undertone.Undertone", "/io/undertone/Undertone"
tap = Tap()


class App:
    """The running program."""

    def __init__(self, plan=None, sheet=True):
        self.log_file = tempfile.TemporaryFile()
        self.process = subprocess.Popen([program, *([str(plan)] if plan else [])], stdout=self.log_file, stderr=subprocess.STDOUT)
        self.bus = Gio.bus_get_sync(Gio.BusType.SESSION)
        self.frame = self.wait("the window", self.find_frame)
        if sheet:
            self.find_sheet()
        self.window = self.wait("the X window", lambda: self.search("search", "--onlyvisible", "--pid", self.process.pid))[-1]

    def find_sheet(self):
        self.sheet = self.wait("the sheet", lambda: self.find("image", "Sheet"))

    def log(self):
        self.log_file.seek(0)
        return self.log_file.read().decode(errors="replace")

    def wait(self, what, look, seconds=20):
        end = time.monotonic() + seconds
        while time.monotonic() < end:
            try:
                found = look()
                if found:
                    return found
            except GLib.Error:
                pass
            if self.process.poll() is not None:
                raise AssertionError(f"the program ended while waiting for {what}:\n{self.log()}")
            time.sleep(0.02)
        raise AssertionError(f"waited for {what} in vain:\n{self.log()}")

    def find_frame(self):
        desktop = Atspi.get_desktop(0)
        for i in range(desktop.get_child_count()):
            app = desktop.get_child_at_index(i)
            if app and app.get_process_id() == self.process.pid and app.get_child_count():
                return app.get_child_at_index(0)
        return None

    def walk(self, node=None):
        node = node or self.frame
        yield node
        for i in range(node.get_child_count()):
            child = node.get_child_at_index(i)
            if child:
                yield from self.walk(child)

    def find(self, role, name):
        return next((node for node in self.walk() if node.get_role_name() == role and name in node.get_name()), None)

    def description(self):
        self.sheet.clear_cache()
        return self.sheet.get_description()

    def actions(self, method, signature, arguments, window=True):
        return self.bus.call_sync(ID, f"{PATH}/window/1" if window else PATH, "org.gtk.Actions", method, GLib.Variant(signature, arguments), None, 0, 10000, None)

    def act(self, name, *parameters, window=True):
        self.actions("Activate", "(sava{sv})", (name, list(parameters), {}), window)

    def describe(self, name):
        """(enabled, state or None)"""
        enabled, _, state = self.actions("Describe", "(s)", (name,)).unpack()[0]
        return enabled, state[0] if state else None

    # Pointer: places come from the program itself, never from constants.

    def xdo(self, *words):
        subprocess.run(["xdotool", *map(str, words)], check=True)

    def search(self, *words):
        return subprocess.run(["xdotool", *map(str, words)], capture_output=True, text=True).stdout.split()

    def offset(self, node):
        box = Atspi.Component.get_extents(node, Atspi.CoordType.WINDOW)
        frame = Atspi.Component.get_extents(self.frame, Atspi.CoordType.WINDOW)
        shell = dict(line.split("=") for line in self.search("getwindowgeometry", "--shell", self.window))
        return (int(shell["X"]) + (int(shell["WIDTH"]) - frame.width) / 2 + box.x, int(shell["Y"]) + (int(shell["HEIGHT"]) - frame.height) / 2 + box.y, box)

    def on_sheet(self, x_m, y_m):
        x, y, _ = self.offset(self.sheet)
        scale, origin_x, origin_y = self.describe("view")[1]
        return round(x + origin_x + x_m * scale), round(y + origin_y - y_m * scale)

    def middle_of(self, node):
        x, y, box = self.offset(node)
        return round(x + box.width / 2), round(y + box.height / 2)

    def drag(self, start, end, steps=8):
        self.xdo("mousemove", *start, "mousedown", 1)
        for i in range(1, steps + 1):
            self.xdo("mousemove", *(round(a + (b - a) * i / steps) for a, b in zip(start, end)))
            time.sleep(0.03)
        time.sleep(0.1)
        self.xdo("mouseup", 1)

    def verdict(self):
        """The last sentence of the sheet's description is the verdict as shown."""
        return self.description().split(". ", 1)[1]

    def quit(self):
        self.act("quit", window=False)
        return self.process.wait(20)


def sentence(plan, *options):
    return run(cli, "solve", str(plan), *options).stdout.decode().split("\n")[2]


with tempfile.TemporaryDirectory() as folder:
    plan = pathlib.Path(folder) / "store.undertone"
    # Nothing that another run left behind, and nothing of the user's.
    for name in ("STATE", "CONFIG", "DATA"):
        os.environ[f"XDG_{name}_HOME"] = str(pathlib.Path(folder) / name.lower())
    start = (examples / "cold-store.undertone").read_bytes()
    plan.write_bytes(start)
    app = App(plan)
    app.wait("the answer", lambda: "14 targets" in app.description())
    tap.check("opens the plan and says what the command line says", same("verdict", app.verdict(), sentence(plan)))

    # The table's figures are the command line's, to the digits shown.
    answer = json.loads(run(cli, "solve", str(plan), "--format", "json").stdout)
    cells = app.wait("the table", lambda: [node.get_name() for node in app.walk() if node.get_role_name() == "label" and re.fullmatch(r"T\d+", node.get_name())])
    labels = [node.get_name() for node in app.walk() if node.get_role_name() == "label"]
    faults = []
    for link in answer["links"]:
        if link["terminal"] not in cells:
            continue  # below the part of the table that is in sight
        at = labels.index(link["terminal"])
        shown = labels[at + 1:at + 8]
        expected = [link["cell"], *(f"{round(link[key], 6):.{digits}f}".replace("-0.00", "0.00") for key, digits in
                                    (("power_dbm", 2), ("target_db", 1), ("sinr_db", 2), ("margin_db", 2), ("signal_dbm", 1), ("interference_dbm", 1)))]
        faults += same(link["terminal"], shown, expected)
    tap.check("the links table shows the command line's figures", faults + ([] if cells else ["no row"]))

    for word, option in (("up", ("--direction", "up")), ("down", ())):
        app.act("direction", GLib.Variant("s", word))
        app.wait(f"{word}link", lambda option=option: app.verdict() == sentence(plan, *option))
    app.act("aim", GLib.Variant("s", "as-set"))
    app.wait("as set", lambda: app.verdict() == sentence(plan, "--aim", "as-set"))
    app.act("aim", GLib.Variant("s", "least-power"))
    app.wait("least powers", lambda: app.verdict() == sentence(plan))
    tap.check("direction and aim change the answer as on the command line", [])

    # The panels, in words: who drowns T4, what would help; each is drawn without a complaint.
    app.act("select", GLib.Variant("s", "terminal T4"))
    faults = []
    for panel, words in (("budget", "As set, T4 hears its cell C1"), ("matrix", "coupling losses"), ("control", "After 60 rounds"), ("things", "Cell C1"), ("remedies", "All targets can be met")):
        app.act("panel", GLib.Variant("s", panel))
        app.wait(f"the panel {panel}", lambda words=words: next((n for n in app.walk() if words in n.get_name()), None))
    button = app.find("push button", "What would give more?") or app.find("button", "What would give more?")
    app.xdo("mousemove", *app.middle_of(button), "click", 1)
    change = app.wait("changes that help", lambda: next((n for n in app.walk() if "headroom" in n.get_name() and "dB more" in n.get_name()), None)).get_name()
    apply_button = app.find("push button", "Apply") or app.find("button", "Apply")
    app.xdo("mousemove", *app.middle_of(apply_button))
    time.sleep(0.2)
    app.xdo("click", 1)
    app.wait("the change", lambda: app.verdict() != sentence(plan))
    found = re.search(r"headroom (-?[0-9.]+) dB", change).group(1)
    faults += same("headroom as told", f"rise by {found} dB" in app.verdict(), True)
    app.act("undo")
    app.wait("the start", lambda: app.verdict() == sentence(plan))
    app.act("panel", GLib.Variant("s", "links"))
    tap.check("panels tell why and what would help; a change is applied and undone", faults)

    # What is printed is the command line's page.
    printed, paged = pathlib.Path(folder) / "printed.pdf", pathlib.Path(folder) / "paged.pdf"
    app.act("print-to", GLib.Variant("s", str(printed)))
    app.wait("the printed page", lambda: printed.exists() and printed.read_bytes().rstrip().endswith(b"%%EOF"))
    run(cli, "page", str(plan), "--output", str(paged))
    texts = [subprocess.run(["pdftotext", "-bbox", str(file), "-"], capture_output=True, text=True).stdout for file in (printed, paged)]
    words = [re.findall(r'xMin="([\d.]+)" yMin="([\d.]+)"[^>]*>([^<]*)<', text) for text in texts]
    apart = [f"{a} and {b}" for a, b in zip(*words) if a[2] != b[2] or abs(float(a[0]) - float(b[0])) > 0.3 or abs(float(a[1]) - float(b[1])) > 0.3]
    tap.check("printing gives the command line's page, word by word in its place", same("words", len(words[0]), len(words[1])) + apart[:5] + ([] if len(words[0]) > 100 else ["no page"]))

    for ending, option in (("csv", "csv"), ("json", "json")):
        sheet = pathlib.Path(folder) / f"powers.{ending}"
        app.act("powers-to", GLib.Variant("s", str(sheet)))
        app.wait("the sheet", sheet.exists)
        tap.check(f"the power sheet is the command line's, {ending}", same("bytes", sheet.read_bytes() == run(cli, "powers", str(plan), "--format", option).stdout, True))

    def preview():
        return next((n for n in app.walk(app.frame.get_parent()) if "The page as it will be printed" in n.get_name()), None)

    app.act("print-preview")
    app.wait("the preview", preview)
    time.sleep(0.3)
    app.xdo("key", "Escape")
    app.wait("its end", lambda: preview() is None)
    tap.check("the preview opens and closes", [])

    # Drag a cell: the answer follows, and what is saved gives the same on the command line.
    before = app.verdict()
    app.drag(app.on_sheet(60, 24), app.on_sheet(40, 30))
    app.wait("the cell selected", lambda: "C3 selected at" in app.description())
    app.wait("another answer", lambda: app.verdict() != before)
    moved = pathlib.Path(folder) / "moved.undertone"
    app.act("save-to", GLib.Variant("s", str(moved)))
    app.wait("the file", moved.exists)
    cell = next(c for c in json.loads(moved.read_text())["cells"] if c["id"] == "C3")
    tap.check("dragging C3 moves it and changes the verdict",
              ([] if abs(cell["x_m"] - 40) < 1 and abs(cell["y_m"] - 30) < 1 else [f"at {cell['x_m']}, {cell['y_m']}"]) + same("verdict", app.verdict(), sentence(moved)))

    # Escape drops a drag.
    app.xdo("mousemove", *app.on_sheet(80, 24), "mousedown", 1)
    for i in range(1, 6):
        app.xdo("mousemove_relative", "--", -12, 9)
        time.sleep(0.03)
    app.xdo("key", "Escape")
    app.xdo("mouseup", 1)
    time.sleep(0.1)
    app.act("save-to", GLib.Variant("s", str(moved)))
    tap.check("Escape gives a drag up", same("C4", [c["x_m"] for c in json.loads(moved.read_text())["cells"] if c["id"] == "C4"], [80]))

    # From the tray: real drag and drop.
    app.drag(app.middle_of(app.find("label", "○ Terminal")), app.on_sheet(30, 24), 10)
    app.wait("the dropped terminal", lambda: "4 cells, 15 terminals" in app.description())
    app.drag(app.middle_of(app.find("label", "■ Cell")), app.on_sheet(30, 26), 10)
    app.wait("the dropped cell", lambda: "5 cells, 15 terminals" in app.description())
    tap.check("a terminal and a cell dragged from the tray", same("selected", "C5 selected at 30" in app.description(), True))

    # Keys: nudge, delete; click to place.
    app.xdo("mousemove", *app.on_sheet(20, 20))
    app.xdo("key", "Right", "shift+Up")
    app.wait("the nudge", lambda: re.search(r"C5 selected at 30\.1\d, 27\.\d+ m", app.description()))
    app.xdo("key", "Delete")
    app.wait("the deletion", lambda: "4 cells, 15 terminals" in app.description())
    app.act("tool", GLib.Variant("s", "terminal"))
    x, y = app.on_sheet(10, 26)
    app.xdo("mousemove", x, y, "click", 1)
    app.wait("the placed terminal", lambda: "4 cells, 16 terminals" in app.description())
    tap.check("nudge, delete and click to place", same("tool", app.describe("tool")[1], "select"))

    # Wheel: the point under the pointer stays.
    scale, origin_x, origin_y = app.describe("view")[1]
    x, y = app.on_sheet(60, 24)
    app.xdo("mousemove", x, y, "click", 4, "click", 4)
    app.wait("the zoom", lambda: app.describe("view")[1][0] > 1.3 * scale)
    tap.check("the wheel zooms about the pointer", [f"{a} became {b}" for a, b in zip((x, y), app.on_sheet(60, 24)) if abs(a - b) > 1])
    app.act("fit")

    # A room with a door, drawn with the pointer and a typed length beside the cold store, and taken back.
    drawn = pathlib.Path(folder) / "drawn.undertone"

    def walls():
        app.act("save-to", GLib.Variant("s", str(drawn)))
        app.wait("the file", drawn.exists)
        return json.loads(drawn.read_text())["storeys"][0]["walls"]

    def click(x_m, y_m):
        app.xdo("mousemove", *(a + b for a, b in zip(app.on_sheet(x_m, y_m), (3, 2))))
        time.sleep(0.05)
        app.xdo("mousemove", *app.on_sheet(x_m, y_m))
        time.sleep(0.05)
        app.xdo("click", 1)
        time.sleep(0.45)  # a second click that is no double click

    n_walls = len(walls())
    app.act("tool", GLib.Variant("s", "wall"))
    click(22, 6)
    app.xdo("mousemove", *app.on_sheet(30, 6))
    time.sleep(0.1)
    app.xdo("key", "1", "0", "Return")
    click(32, 12)
    click(22, 12)
    click(22, 6)
    app.wait("the wall", lambda: "wall W" in app.description())
    room = walls()[-1]
    corners = [[round(a, 6) for a in point] for point in room["points"]]
    (x0, y0), (x1, y1), (x2, y2), (x3, y3) = corners[:4]
    tap.check("a room is drawn, square and closed",
              same("walls", len(walls()), n_walls + 1) + same("corners", len(corners), 5) + same("closed", corners[4], corners[0])
              + same("typed length", round(x1 - x0, 6), 10) + same("square", [y1, x2, y3], [y0, x1, y2]))
    app.act("tool", GLib.Variant("s", "opening"))
    app.drag(app.on_sheet(x0 + 4, y0), app.on_sheet(x0 + 6, y0))
    app.wait("the opening", lambda: walls()[-1].get("openings"))
    app.xdo("mousemove", *app.on_sheet(x0 + 5, y0), "click", 1)
    app.wait("the door opened", lambda: not walls()[-1]["openings"][0].get("shut", True))
    door = walls()[-1]["openings"][0]
    tap.check("a door is drawn along its wall and opened by a click", [] if 1.5 < door["width_m"] < 2.5 and 3.5 < door["at_m"] < 4.5 else [f"{door}"])
    app.act("tool", GLib.Variant("s", "select"))
    app.drag(app.on_sheet(x2, y2), app.on_sheet(x2 + 3, y2))
    app.wait("the corner moved", lambda: walls()[-1]["points"][2][0] > x2 + 2)
    for _ in range(4):
        app.act("undo")
    app.wait("the walls of before", lambda: len(walls()) == n_walls)
    app.act("save-to", GLib.Variant("s", str(moved)))
    tap.check("corners are dragged, and all of it is undone", [])

    # A picture under the storey, brought to scale by two clicks and a typed length.
    picture = pathlib.Path(folder) / "floor.svg"
    picture.write_text("<svg xmlns='http://www.w3.org/2000/svg' width='400' height='300'><rect x='40' y='40' width='300' height='200' fill='none' stroke='#000'/></svg>")

    def saved():
        app.act("save-to", GLib.Variant("s", str(drawn)))
        return json.loads(drawn.read_text())

    app.act("storey-add")
    app.wait("the new storey", lambda: len(saved()["storeys"]) == 2)
    app.act("backdrop-take", GLib.Variant("s", str(picture)))
    app.wait("the backdrop tool", lambda: app.describe("tool")[1] == "backdrop")
    width = saved()["storeys"][1]["backdrop"]["width_m"]
    (x0, y0), (x1, y1) = app.on_sheet(5, 5), app.on_sheet(15, 5)
    for x, y in ((x0, y0), (x1, y1)):
        app.xdo("mousemove", x, y)
        time.sleep(0.1)
        app.xdo("click", 1)
        time.sleep(0.45)
    app.wait("the marks", lambda: "as drawn" in app.description())
    app.xdo("key", "2", "0", "Return")
    app.wait("the scale", lambda: saved()["storeys"][1]["backdrop"]["width_m"] > width)
    ratio = saved()["storeys"][1]["backdrop"]["width_m"] / width
    pixel = 1 / app.describe("view")[1][0]
    tap.check("two clicks and a length set the backdrop's scale", [] if abs(ratio - 2) < 0.4 * pixel + 0.01 else [f"{ratio}"])
    app.act("undo")
    app.act("undo")
    app.act("undo")
    app.act("tool", GLib.Variant("s", "select"))
    app.wait("one storey", lambda: len(saved()["storeys"]) == 1)

    # Box select, duplicate, copy and paste with the keys.
    app.act("fit")
    n_terminals = len(saved()["terminals"])
    app.drag(app.on_sheet(6, 2.5), app.on_sheet(30, 13), 10)
    app.wait("what is in the box", lambda: "T" in app.description().split("terminals")[1].split(".")[0] and "selected" in app.description())
    app.xdo("key", "ctrl+d")
    app.wait("the duplicates", lambda: len(saved()["terminals"]) > n_terminals)
    n_more = len(saved()["terminals"]) - n_terminals
    app.xdo("key", "ctrl+c")
    time.sleep(0.2)
    app.xdo("key", "ctrl+v")
    app.wait("what was pasted", lambda: len(saved()["terminals"]) == n_terminals + 2 * n_more)
    app.xdo("key", "ctrl+x")
    app.wait("what was cut", lambda: len(saved()["terminals"]) == n_terminals + n_more)
    app.xdo("key", "ctrl+z", "ctrl+z", "ctrl+z")
    app.wait("all undone", lambda: len(saved()["terminals"]) == n_terminals)
    tap.check("box select, duplicate, copy, paste and cut by keys", [] if n_more > 0 else ["nothing in the box"])
    app.act("save-to", GLib.Variant("s", str(moved)))

    # Undo everything, save, and the bytes are those of the start.
    steps = 0
    while app.describe("undo")[0]:
        app.act("undo")
        steps += 1
        assert steps < 50
    app.wait("the start again", lambda: "4 cells, 14 terminals" in app.description() and app.verdict() == before)
    app.act("save")
    app.wait("the saved file", lambda: moved.read_bytes() == start)
    tap.check("undoing every step and saving gives the same bytes", same("steps", steps, 6))
    app.act("open-uri", GLib.Variant("s", plan.as_uri()))
    app.wait("a second window", lambda: Atspi.get_desktop(0) and "store.undertone" in [n.get_name() for n in app.walk(app.frame.get_parent())])
    tap.check("another plan opens in a window of its own", [])

    code = app.quit()
    noise = [line for line in app.log().splitlines() if re.search("CRITICAL|WARNING|ERROR|runtime error|Sanitizer", line)]
    tap.check("ends with 0 and without a complaint", same("exit", code, 0) + noise)

    # Killed in the middle of work: what was unsaved is there again, and Undo leads back to the file.
    app = App(plan)
    app.wait("the answer", lambda: "14 targets" in app.description())
    app.act("select", GLib.Variant("s", "cell C3"))
    app.act("duplicate")
    app.wait("the step", lambda: "5 cells" in app.description())
    app.wait("a copy on disk", lambda: list((pathlib.Path(folder) / "state").rglob("*.undertone")), 10)
    app.process.kill()
    app.process.wait()
    time.sleep(0.5)
    app = App()
    app.wait("the unsaved work", lambda: "5 cells" in app.description())
    app.act("undo")
    app.wait("the file", lambda: "4 cells" in app.description())
    code = app.quit()
    tap.check("a killed program's work is recovered", same("exit", code, 0) + same("file", plan.read_bytes() == start, True)
              + same("left", [str(p) for p in (pathlib.Path(folder) / "state").rglob("*.undertone")], [])
              + [line for line in app.log().splitlines() if re.search("CRITICAL|WARNING|Sanitizer", line)])

    # Without a file: a page to begin with; an example opens from it. A file changed by another is told of.
    app = App(sheet=False)
    app.wait("the start page", lambda: app.find("push button", "Two rooms") or app.find("button", "Two rooms"))
    app.act("open-example", GLib.Variant("s", "two-rooms.undertone"))
    app.find_sheet()
    app.wait("the example", lambda: "2 cells" in app.description())
    mine = pathlib.Path(folder) / "mine.undertone"
    app.act("save-to", GLib.Variant("s", str(mine)))
    app.wait("the file", mine.exists)
    time.sleep(0.3)
    mine.write_bytes(mine.read_bytes().replace(b"Two rooms", b"Two halls"))
    app.wait("the notice", lambda: next((n for n in app.walk() if "Another program has changed the file" in n.get_name()), None))
    app.act("reload")
    app.wait("the other's title", lambda: next((n for n in app.walk() if "Two halls" in n.get_name()), None))
    code = app.quit()
    tap.check("the start page opens an example; a file changed outside is noticed and read again", same("exit", code, 0)
              + [line for line in app.log().splitlines() if re.search("CRITICAL|WARNING|Sanitizer", line)])

    # The same by keys alone: a room with a door, a cell and terminals, all selected, duplicated, moved; undone to the first bytes and redone to the last.
    app = App(sheet=False)
    app.wait("the start page", lambda: app.find("push button", "New plan") or app.find("button", "New plan"))
    app.xdo("mousemove", 5, 5)
    app.xdo("key", "Return")
    app.find_sheet()
    app.wait("an empty plan", lambda: "0 cells, 0 terminals" in app.description())
    typed = pathlib.Path(folder) / "typed.undertone"

    def plan_now():
        app.act("save-to", GLib.Variant("s", str(typed)))
        app.wait("the file", typed.exists)
        return json.loads(typed.read_text())

    def keys(*words):
        for word in words:
            app.xdo("key", word)
            time.sleep(0.06)

    plan_now()
    first = typed.read_bytes()
    keys("w", "Right", "space")
    for direction, length in (("Right", "9"), ("Up", "6"), ("Left", "9"), ("Down", "6")):
        keys(f"shift+{direction}", length, "Return")
    keys("Return")
    app.wait("the room", lambda: len(plan_now()["storeys"][0]["walls"]) == 1)
    room = [[round(a, 6) for a in point] for point in plan_now()["storeys"][0]["walls"][0]["points"]]
    (x, y), faults = room[0], []
    faults += same("room", room, [[x, y], [x + 9, y], [x + 9, y + 6], [x, y + 6], [x, y]])
    keys("o", "shift+Right", "shift+Right", "space", "shift+Right", "space")
    app.wait("the door", lambda: plan_now()["storeys"][0]["walls"][0].get("openings"))
    door = plan_now()["storeys"][0]["walls"][0]["openings"][0]
    faults += same("door", [round(door["at_m"], 6), round(door["width_m"], 6)], [2, 1])
    keys("c", "shift+Up", "shift+Up", "space", "t", "shift+Right", "shift+Right", "space", "shift+Up", "space", "Escape")
    app.wait("the radios", lambda: "1 cells, 2 terminals" in app.description())
    keys("ctrl+a", "ctrl+d", "shift+Right", "Up")
    app.wait("the duplicates", lambda: "2 cells, 4 terminals" in app.description())
    # The nudges behind them have no word of their own: the plan is done when it changes no more.
    last = None
    while last != (plan_now(), typed.read_bytes())[1]:
        last = typed.read_bytes()
        time.sleep(0.4)
    while app.describe("undo")[0]:
        keys("ctrl+z")
    plan_now()
    faults += same("undone", typed.read_bytes() == first, True)
    while app.describe("redo")[0]:
        keys("ctrl+shift+z")
    plan_now()
    faults += same("redone", typed.read_bytes() == last, True)
    while app.describe("undo")[0]:
        keys("ctrl+z")
    plan_now()
    code = app.quit()
    tap.check("a plan drawn by keys alone, undone and redone", faults + same("exit", code, 0)
              + [line for line in app.log().splitlines() if re.search("CRITICAL|WARNING|Sanitizer", line)])

    # What is broken is told of and changes nothing.
    broken = pathlib.Path(folder) / "broken.undertone"
    broken.write_text('{"undertone": 1, oops}')
    app = App(broken)
    app.wait("the message", lambda: next((n for n in app.walk(app.frame.get_parent()) if "cannot be opened" in n.get_name()), None))
    told = next(n.get_name() for n in app.walk(app.frame.get_parent()) if "line 1, column" in n.get_name())
    tap.check("a broken plan is told of with its place", same("place", "line 1, column 18" in told, True))
    code = app.quit()
    tap.check("and the program ends well", same("exit", code, 0) + [line for line in app.log().splitlines() if re.search("CRITICAL|WARNING|Sanitizer", line)])
tap.end()
