"""The translations are whole: every text of the program is in every language, with the same places for figures.

usage: words.py SOURCE_ROOT
"""
import pathlib
import re
import subprocess
import sys
import tempfile

root = pathlib.Path(sys.argv[1])
sys.path.insert(0, str(root / "tests"))
from tap import Tap  # noqa: E402

tap = Tap()
MACROS = re.search(r"foreach macro : \[([^]]*)\]", (root / "po/meson.build").read_text()).group(1).replace("'", "").replace(",", " ").split()
KEYWORDS = ["_", "N_", "g_dngettext:2,3", "ngettext:1,2", *(f"{macro}:1" for macro in MACROS)]


def gettext(*words):
    return subprocess.run(words, cwd=root, capture_output=True, text=True)


with tempfile.TemporaryDirectory() as folder:
    template = f"{folder}/all.pot"
    made = gettext("xgettext", "--from-code=UTF-8", "--files-from=po/POTFILES", "--output", template, *(f"--keyword={word}" for word in KEYWORDS))
    tap.check("texts can be gathered", [] if made.returncode == 0 else [made.stderr])
    listed = set((root / "po/POTFILES").read_text().split())
    unlisted = [str(file.relative_to(root)) for file in sorted((root / "src").rglob("*.c"))
                if re.search(r"\bN?_ \(\"|ngettext \(", file.read_text(encoding="utf-8")) and str(file.relative_to(root)) not in listed]
    tap.check("po/POTFILES names every file with texts", unlisted)
    for language in (root / "po/LINGUAS").read_text().split():
        po = f"po/{language}.po"
        checked = gettext("msgfmt", "--check-format", "--output-file", f"{folder}/{language}.mo", po)
        whole = gettext("msgcmp", po, template)
        tap.check(f"{language} is whole", [line for result in (checked, whole) if result.returncode != 0 for line in result.stderr.splitlines()])
tap.end()
