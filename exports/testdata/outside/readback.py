"""Every number of a record's sheets Readings (column Value) and Results, as openpyxl reads it, hexadecimal, row by row.

Usage: python3 readback.py RECORD.xlsx
"""
import sys

import openpyxl

book = openpyxl.load_workbook(sys.argv[1], read_only=True, data_only=True)
for sheet, first, columns in (("Readings", 4, slice(3, 4)), ("Results", 6, slice(None))):
    for row in book[sheet].iter_rows(min_row=first, values_only=True):
        for x in row[columns]:
            if isinstance(x, (int, float)) and not isinstance(x, bool):
                print(float(x).hex())
