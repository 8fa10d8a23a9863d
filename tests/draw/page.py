"""The printed page, read back.  usage: page.py UNDERTONE-CLI EXAMPLES_FOLDER   (pdftotext and pdfinfo of poppler-utils)"""
import json
import pathlib
import re
import subprocess
import sys
import tempfile
import xml.etree.ElementTree as tree

sys.path.insert(0, str(pathlib.Path(__file__).resolve().parents[1]))
from tap import Tap, near, run, same  # noqa: E402

program, examples = sys.argv[1], pathlib.Path(sys.argv[2])
tap = Tap()


def page(plan, target, *options):
    ran = run(program, "page", str(plan), "--output", str(target), *options)
    if ran.returncode != 0:
        raise RuntimeError(ran.stderr.decode())


def text_of(pdf):
    return subprocess.run(["pdftotext", "-layout", str(pdf), "-"], capture_output=True, text=True, check=True).stdout


# Paper sizes in points: A4, A3 by ISO 216; Letter 8.5 x 11 in, Tabloid 11 x 17 in.
SIZES = {"a4": (595.276, 841.89), "a3": (841.89, 1190.55), "letter": (612, 792), "tabloid": (792, 1224)}

with tempfile.TemporaryDirectory() as folder:
    for plan in sorted(examples.glob("*.undertone")):
        pdf = pathlib.Path(folder) / "page.pdf"
        for direction in ("down", "up"):
            page(plan, pdf, "--direction", direction)
            text = text_of(pdf)
            answer = json.loads(run(program, "solve", str(plan), "--format", "json", "--direction", direction).stdout)
            faults = []
            # The powers as they are typed in, which tests/cli/powers.py holds to the answer.
            for sender in json.loads(run(program, "powers", str(plan), "--format", "json", "--direction", direction).stdout)["radios"]:
                figure = f"{sender['power_dbm']:.2f}".replace("-0.00", "0.00").replace("-", "−")
                if not re.search(rf"{re.escape(sender['id'])}\b.*{re.escape(figure)}", text):
                    faults.append(f"power of {sender['id']}, {figure}, is missing")
            faults += [] if re.search(r"Scale 1:\d+", text) else ["no scale"]
            # Columns stand side by side in the text, so that sentences are looked for word by word.
            wanted = f"measure site local rules licences compliance distance qualified people {answer['verdict']} Fingerprint"
            faults += [f"{word!r} is missing" for word in wanted.split() if word not in text]
            tap.check(f"{plan.stem}, {direction}: every power, the scale, the verdict and the cautions are on it", faults)
    for paper, (width, height) in SIZES.items():
        for orientation in ("portrait", "landscape"):
            page(examples / "cold-store.undertone", pdf, "--paper", paper, "--orientation", orientation)
            info = subprocess.run(["pdfinfo", str(pdf)], capture_output=True, text=True, check=True).stdout
            size = [float(x) for x in re.search(r"Page size: +([\d.]+) x ([\d.]+)", info).groups()]
            wide, high = (width, height) if orientation == "portrait" else (height, width)
            tap.check(f"{paper} {orientation}: one page of the right size", same("pages", re.search(r"Pages: +(\d+)", info).group(1), "1")
                      + near("width", size[0], wide, 0.1) + near("height", size[1], high, 0.1))

    # A known distance measures right on paper: the outer wall of the two rooms is 12 m by 6 m.
    svg = pathlib.Path(folder) / "page.svg"
    for target in (svg, pdf):
        page(examples / "two-rooms.undertone", target)
    scale = float(re.search(r"Scale 1:(\d+)", text_of(pdf)).group(1))
    longest = {0: 0.0, 1: 0.0}
    for element in tree.parse(svg).getroot().iter("{http://www.w3.org/2000/svg}path"):
        data, style = element.get("d", ""), element.get("style", "") + str(element.attrib)
        if "stroke" not in style:
            continue
        matrix = [float(x) for x in re.findall(r"-?[\d.]+(?:e-?\d+)?", element.get("transform", "matrix(1 0 0 1 0 0)"))]
        points = [(matrix[0] * float(x) + matrix[4], matrix[3] * float(y) + matrix[5]) for x, y in re.findall(r"[ML] (-?[\d.]+) (-?[\d.]+)", data)]
        # The outer wall: five points, closed, before the page's own frames (those are closed by Z).
        if len(points) >= 5 and "Z" not in data.upper():
            for axis in (0, 1):
                longest[axis] = max(longest[axis], max(p[axis] for p in points) - min(p[axis] for p in points))
    mm = 25.4 / 72
    tap.check("12 m and 6 m measure right on paper within 0.2 mm",
              near("12 m", longest[0] * mm, 12e3 / scale, 0.2) + near("6 m", longest[1] * mm, 6e3 / scale, 0.2))
tap.end()
