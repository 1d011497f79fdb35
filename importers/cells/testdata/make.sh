#!/bin/sh
# Makes the workbooks of this folder: openpyxl.xlsx with Python's openpyxl (3.0.9), libreoffice.xlsx by LibreOffice (7.4)
# from the first. Run it in this folder; the files are committed, the tests need neither program.
set -e
${PYTHON:-python3} - <<'PYTHON'
import datetime
from openpyxl import Workbook
from openpyxl.styles import Font

b = Workbook()
s = b.active
s.title = "Data & more"
s.append(["Lot", "Part", "Bore [mm]", "Date", "Passed", "Share", "Formula", "Error", "Text number", "Note"])
for i in range(40):
    s.append(["REF-0417" if i < 20 else "CAND-0931", i + 1, 12 + (i * 7919 % 101) / 1000, datetime.datetime(2026, 3, 2 + i % 20),
              i % 3 > 0, i / 40, "=C%d*2" % (i + 2), "=1/0" if i == 3 else None, "12,%03d" % i, None])
s["J3"] = " two\nlines \t<&>\"' 😀 Ω "
s["J4"] = "_x0041_"
s["J5"] = "=\"a\"&\"b\""
s["C6"].number_format = '0.000" mm"'
s["F7"].number_format = "0.0%"
s["A1"].font = Font(bold=True)
s.merge_cells("L2:M4")
s.column_dimensions["I"].hidden = True
s.row_dimensions[9].hidden = True
h = b.create_sheet("hidden")
h.sheet_state = "hidden"
h["XFD1048576"] = 0.1 + 0.2
b.create_sheet("empty")
b.save("openpyxl.xlsx")
PYTHON
soffice --headless --convert-to 'xlsx:Calc MS Excel 2007 XML' --outdir converted openpyxl.xlsx
mv converted/openpyxl.xlsx libreoffice.xlsx
rmdir converted
