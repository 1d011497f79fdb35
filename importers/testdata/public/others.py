"""Writes sleep.xlsx with openpyxl from sleep.csv, and sleep.ods and sleep-libreoffice.xlsx with LibreOffice from that.

Run in this directory: python3 others.py   (needs openpyxl, and soffice on the path)
"""

import csv
import os
import shutil
import subprocess
import tempfile

import openpyxl

book = openpyxl.Workbook()
sheet = book.active
sheet.title = "sleep"
with open("sleep.csv", newline="") as f:
    for i, row in enumerate(csv.reader(f)):
        sheet.append(row if i == 0 else [int(row[0]), float(row[1]), row[2], row[3]])
book.save("sleep.xlsx")
for ending, name in (("ods", "sleep.ods"), ("xlsx", "sleep-libreoffice.xlsx")):
    with tempfile.TemporaryDirectory() as out:
        subprocess.run(
            ["soffice", "-env:UserInstallation=file://" + out + "/profile", "--headless", "--convert-to", ending, "--outdir", out, "sleep.xlsx"],
            check=True,
            stdout=subprocess.DEVNULL,
            stderr=subprocess.DEVNULL,
        )
        shutil.move(os.path.join(out, "sleep." + ending), name)
