"""Writes openpyxl.xlsx, libreoffice.xlsx and libreoffice.ods beside own.xlsx of the cases: the same cells as other programs
write them. n14 is left out: they calculate anew, or drop the stored values; so are files that are no workbooks (n38) and those
of which only the plan is odd (n43).

Run in this directory: python3 others.py [case ...]   (needs openpyxl, and soffice on the path)
"""

import glob
import os
import shutil
import subprocess
import sys
import tempfile

import openpyxl

for own in sorted(glob.glob("*/own.xlsx")):
    case = os.path.dirname(own)
    if case == "n14" or case.startswith(("n38", "n43")) or sys.argv[1:] and case not in sys.argv[1:]:
        continue
    openpyxl.load_workbook(own).save(os.path.join(case, "openpyxl.xlsx"))
    for ending in ("xlsx", "ods"):
        with tempfile.TemporaryDirectory() as out:
            subprocess.run(
                ["soffice", "-env:UserInstallation=file://" + out + "/profile", "--headless", "--convert-to", ending, "--outdir", out, own],
                check=True,
                stdout=subprocess.DEVNULL,
                stderr=subprocess.DEVNULL,
            )
            shutil.move(os.path.join(out, "own." + ending), os.path.join(case, "libreoffice." + ending))
