"""Keeps the fences between the layers, by what the files include.  Prints TAP.  usage: fences.py SOURCE_ROOT"""
import pathlib
import re
import sys

root = pathlib.Path(sys.argv[1])
# Own folders a folder may include from, besides itself; libraries it may include, by the first part of the header's name.
LAYERS = {
    "radio": ((), ()),
    "power": ((), ("lapacke.h", "cblas.h", "openblas")),
    "plan": ((), ("glib", "gio", "json-glib")),
    "study": (("radio", "power", "plan"), ("glib", "gio", "json-glib")),
    "draw": (("plan", "study"), ("glib", "gio", "cairo", "pango", "gdk-pixbuf", "poppler")),
    "cli": (("radio", "power", "plan", "study", "draw"), ("glib", "gio")),
    "app": (("plan", "study", "draw"), ("glib", "gio", "gtk", "cairo")),
}
# What C17 and POSIX bring; GNU's or others' headers are not here on purpose.
STANDARD = {"assert", "complex", "ctype", "errno", "fcntl", "float", "limits", "locale", "math", "stdarg", "stdbool", "stddef",
            "stdint", "stdio", "stdlib", "string", "time", "unistd", "sys/stat", "sys/types"}


def owner(header):
    """The folder of src/ that has this header, or None."""
    found = [folder for folder in LAYERS if any((root / "src" / folder).rglob(header))]
    return found[0] if found else None


def faults_of(folder, file):
    may_folders, may_libraries = LAYERS[folder]
    faults = []
    for number, line in enumerate(file.read_text(encoding="utf-8").splitlines(), 1):
        match = re.match(r'\s*#\s*include\s*([<"])([^>"]+)[>"]', line)
        if not match:
            continue
        quoted, header = match.group(1) == '"', match.group(2)
        if quoted:
            home = owner(header)
            good = home == folder or home in may_folders
        else:
            good = header.removesuffix(".h") in STANDARD or any(header.startswith(part) for part in may_libraries)
        if not good:
            faults.append(f"{file.relative_to(root)}:{number}: {folder} may not include {header}")
    return faults


plan = 0
bad = 0
for folder in LAYERS:
    files = sorted((root / "src" / folder).rglob("*.[ch]"))
    faults = [fault for file in files for fault in faults_of(folder, file)]
    if not files:
        faults.append(f"src/{folder} holds no source")
    plan += 1
    bad += bool(faults)
    print(f"{'not ok' if faults else 'ok'} {plan} - src/{folder} stays inside its fence")
    for fault in faults:
        print(f"# {fault}")

# Header names are unique, so that an include means one file.
names = {}
for file in (root / "src").rglob("*.h"):
    names.setdefault(file.name, []).append(str(file.relative_to(root)))
doubles = [paths for paths in names.values() if len(paths) > 1]
plan += 1
bad += bool(doubles)
print(f"{'not ok' if doubles else 'ok'} {plan} - header names are unique")
for paths in doubles:
    print(f"# {' and '.join(paths)}")
print(f"1..{plan}")
sys.exit(1 if bad else 0)
