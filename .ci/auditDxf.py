#!/usr/bin/python3
"""Audits DXF files with a reader that is not ours (python3-ezdxf): no errors, no repairs, at least one closed contour."""
import sys

import ezdxf

bad = 0
for name in sys.argv[1:]:
    doc = ezdxf.readfile(name)
    audit = doc.audit()
    closed = [e for e in doc.modelspace().query("POLYLINE LWPOLYLINE") if e.is_closed]
    if audit.errors or audit.fixes or not closed:
        bad += 1
        print(f"{name}: {len(audit.errors)} errors, {len(audit.fixes)} repairs, {len(closed)} closed contours")
sys.exit(1 if bad or len(sys.argv) < 2 else 0)
