"""Writes openpyxl.xlsx and libreoffice.xlsx beside own.xlsx of some cases: the same cells as other programs write them.

Run in this directory: python3 others.py [case ...]   (needs openpyxl, and soffice on the path)
"""

import os
import shutil
import subprocess
import sys
import tempfile

import openpyxl

CASES = """l1 l2 l3 l5-1 l5-5 l5-64 l6 l6-below l7-d2 l7-d3 l9 l10 n01 n01-fields n01-form n02-wide n03-wide n04-wide n04-unequal n09 n09-groups n16 n20-columns n22 n24-read n24-fit
n25 n31-beside n31-stacked n31-halves n32 n32-paths n34 n42-numbers signs l5-plus l5-split l5-both n02-plus tidy tidy-limits tidy-sheets tidy-many tidy-conflict
tidy-paired tidy-merged""".split()

for case in sys.argv[1:] or CASES:
    own = os.path.join(case, "own.xlsx")
    openpyxl.load_workbook(own).save(os.path.join(case, "openpyxl.xlsx"))
    with tempfile.TemporaryDirectory() as out:
        subprocess.run(
            ["soffice", "-env:UserInstallation=file://" + out + "/profile", "--headless", "--convert-to", "xlsx", "--outdir", out, own],
            check=True,
            stdout=subprocess.DEVNULL,
            stderr=subprocess.DEVNULL,
        )
        shutil.move(os.path.join(out, "own.xlsx"), os.path.join(case, "libreoffice.xlsx"))
