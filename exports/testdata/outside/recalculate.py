"""Have LibreOffice compute every formula of a record's sheet Workings again, and print what it gives beside what is stated.

Usage: python3 recalculate.py RECORD.xlsx... Needs LibreOffice with python3-uno. Prints, tab separated: file, figure, computed, stated
(hexadecimal), then the cell. Exit code 1 when a formula gives an error.
"""
import os
import subprocess
import sys
import tempfile
import time

import uno
from com.sun.star.beans import PropertyValue
from com.sun.star.connection import NoConnectException
from com.sun.star.table.CellContentType import FORMULA

with tempfile.TemporaryDirectory() as profile:
    pipe = "recalculate%d" % os.getpid()
    office = subprocess.Popen(
        ["soffice", "--headless", "--norestore", "-env:UserInstallation=file://" + profile, "--accept=pipe,name=%s;urp;" % pipe],
        stdout=subprocess.DEVNULL, stderr=subprocess.DEVNULL)
    wrong = 0
    try:
        context = uno.getComponentContext()
        resolver = context.ServiceManager.createInstanceWithContext("com.sun.star.bridge.UnoUrlResolver", context)
        for _ in range(240):
            try:
                remote = resolver.resolve("uno:pipe,name=%s;urp;StarOffice.ComponentContext" % pipe)
                break
            except NoConnectException:
                time.sleep(0.25)
        else:
            sys.exit("LibreOffice did not start")
        desktop = remote.ServiceManager.createInstanceWithContext("com.sun.star.frame.Desktop", remote)
        hidden = PropertyValue()
        hidden.Name, hidden.Value = "Hidden", True
        for name in sys.argv[1:]:
            book = desktop.loadComponentFromURL(uno.systemPathToFileUrl(os.path.abspath(name)), "_blank", 0, (hidden,))
            sheet = book.Sheets.getByName("Workings")
            book.calculateAll()
            cursor = sheet.createCursor()
            cursor.gotoEndOfUsedArea(False)
            for row in range(cursor.RangeAddress.EndRow + 1):
                cell = sheet.getCellByPosition(1, row)
                if cell.Type != FORMULA:
                    continue
                if cell.getError() != 0:
                    print(name, sheet.getCellByPosition(0, row).String, "error %d in %s" % (cell.getError(), cell.Formula), sep="\t", file=sys.stderr)
                    wrong = 1
                    continue
                stated = sheet.getCellByPosition(2, row)
                print(os.path.basename(name), sheet.getCellByPosition(0, row).String, cell.Value.hex(), stated.Value.hex() if stated.String else "", "B%d" % (row + 1), sep="\t")
            book.close(True)
    finally:
        office.terminate()
        office.wait(30)
sys.exit(wrong)
