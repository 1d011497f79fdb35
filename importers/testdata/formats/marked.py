"""Writes marked.xlsx with openpyxl and marked.ods with LibreOffice: D1 with cells that carry marks (N30).

Run in this directory: python3 marked.py   (needs openpyxl, and soffice on the path)
"""

import os
import shutil
import subprocess
import tempfile

import openpyxl
from openpyxl.comments import Comment
from openpyxl.styles import Font, PatternFill

REFERENCE = "12.003 11.994 12.011 12.007 11.998 12.015 12.002 12.009 11.989 12.006 12.012 12.001".split()
CANDIDATE = "12.008 12.013 11.997 12.019 12.004 12.011 11.992 12.016 12.006 12.001 12.022 12.009".split()

book = openpyxl.Workbook()
sheet = book.active
sheet.title = "Data"
sheet.append(["Lot", "Part", "Bore dia [mm]"])
for lot, values in (("REF-0417", REFERENCE), ("CAND-0931", CANDIDATE)):
    for i, v in enumerate(values):
        sheet.append([lot, i + 1, float(v)])
sheet["C15"].font = Font(strike=True)
sheet["C17"].font = Font(strike=True)
sheet["C18"].fill = PatternFill("solid", fgColor="FFFF0000")
sheet["C19"].comment = Comment("re-measured 12.006", "QA")
book.save("marked.xlsx")
with tempfile.TemporaryDirectory() as out:
    subprocess.run(
        ["soffice", "-env:UserInstallation=file://" + out + "/profile", "--headless", "--convert-to", "ods", "--outdir", out, "marked.xlsx"],
        check=True,
        stdout=subprocess.DEVNULL,
        stderr=subprocess.DEVNULL,
    )
    shutil.move(os.path.join(out, "marked.ods"), "marked.ods")
