#!/usr/bin/python3
"""Audits the sheets of a plan by the boxes of their words, as another program finds them (pdftotext): inside the frame, none over another, none
under 9 pt, nothing shortened but names. Usage: auditPdf.py PLAN-FOLDER"""
import html
import re
import subprocess
import sys
from pathlib import Path

MM = 72 / 25.4
WORD = re.compile(r'<page width="([\d.]+)" height="([\d.]+)"|<word xMin="([\d.-]+)" yMin="([\d.-]+)" xMax="([\d.-]+)" yMax="([\d.-]+)">([^<]*)<')


def faults_of(path):
    text = subprocess.run(["pdftotext", "-bbox", str(path), "-"], capture_output=True, check=True).stdout.decode()
    faults, pages, size, words = [], [], (0, 0), 0
    for m in WORD.finditer(text):
        if m[1]:
            size = (float(m[1]) / MM, float(m[2]) / MM)
            pages.append([])
            continue
        x0, y0, x1, y1 = (float(v) / MM for v in m.group(3, 4, 5, 6))
        pages[-1].append((x0, y0, x1, y1, html.unescape(m[7])))
    for n, page in enumerate(pages, 1):
        words += len(page)
        ink = []
        for x0, y0, x1, y1, word in page:
            # Frame and binding margin as the sheets have them, mm.
            if x0 < 20 or x1 > size[0] - 10 or y0 < 9.5 or y1 > size[1] - 9.5:
                faults.append(f"{path.name} sheet {n}: \"{word}\" leaves the frame")
            # The box of a word is ascent and descent of its face, 1.164 of the size.
            if (y1 - y0) * MM / 1.164 < 8.95:
                faults.append(f"{path.name} sheet {n}: \"{word}\" is under 9 pt")
            if re.search(r"\d\S*…|…\S*\d\S*[\"'/.]", word):
                faults.append(f"{path.name} sheet {n}: a number is shortened, \"{word}\"")
            h = y1 - y0
            ink.append((x0, y0 + 0.2 * h, x1, y1 - 0.22 * h, word))
        ink.sort()
        for i, a in enumerate(ink):
            for b in ink[i + 1:]:
                if b[0] >= a[2] - 0.05:
                    break
                if a[1] < b[3] and b[1] < a[3]:
                    faults.append(f"{path.name} sheet {n}: \"{a[4]}\" over \"{b[4]}\"")
    return faults, words, len(pages)


def main(folder):
    faults, words, sheets = [], 0, 0
    for path in sorted(folder.glob("*.pdf")):
        found, w, s = faults_of(path)
        faults, words, sheets = faults + found, words + w, sheets + s
    for fault in faults:
        print(fault)
    print(f"{folder}: {words} words on {sheets} sheets, {len(faults)} faults")
    return 1 if faults or words == 0 else 0


sys.exit(main(Path(sys.argv[1])) if len(sys.argv) == 2 else 2)
