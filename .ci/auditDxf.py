#!/usr/bin/python3
"""Audits the cut files of a plan with readers that are not ours (python3-ezdxf, numpy): no errors, no repairs; every contour on CUT equals the
facts within 0.01 mm, closed and counted, in DXF R12, DXF 2000 and SVG; the extents a header states are those of what is drawn, in mm.
Usage: auditDxf.py PLAN-FOLDER"""
import json
import re
import sys
from pathlib import Path

import ezdxf
import numpy as np
from ezdxf import bbox

LIMIT = 0.01
SVG_MARGIN = 20.0


def off(points, ring):
    """Greatest distance of the points from the closed ring, mm."""
    a, b = ring, np.roll(ring, -1, axis=0)
    d = b - a
    worst = 0.0
    for part in np.array_split(points, max(1, len(points) // 200)):
        t = ((part[:, None] - a) * d).sum(2) / np.maximum((d * d).sum(1), 1e-30)
        near = a + np.clip(t, 0, 1)[..., None] * d
        worst = max(worst, float(np.linalg.norm(part[:, None] - near, axis=2).min(1).max()))
    return worst


def compare(name, found, wanted):
    """Faults of the contours found against the outlines wanted: as many, each within the limit both ways."""
    faults = []
    if len(found) != len(wanted):
        faults.append(f"{name}: {len(found)} closed contours on CUT, {len(wanted)} wanted")
    left = list(found)
    for who, ring in wanted.items():
        low, high = ring.min(0), ring.max(0)
        # Two pieces may fill the same box: of those that do, the nearest outline counts.
        near = [k for k, c in enumerate(left) if max(abs(c.min(0) - low).max(), abs(c.max(0) - high).max()) < 1]
        apart = {k: max(off(left[k], ring), off(ring, left[k])) for k in near}
        best = min(apart, key=apart.get, default=None)
        if best is None or apart[best] > LIMIT:
            faults.append(f"{name}: no contour within {LIMIT} mm of {who}")
        else:
            left.pop(best)
    return faults


def dxf_contours(path, faults):
    doc = ezdxf.readfile(path)
    audit = doc.audit()
    if audit.errors or audit.fixes:
        faults.append(f"{path}: {len(audit.errors)} errors, {len(audit.fixes)} repairs")
    lines = [e for e in doc.modelspace() if e.dxftype() in ("POLYLINE", "LWPOLYLINE")]
    box = bbox.extents(lines, fast=True)
    low, high = doc.header["$EXTMIN"], doc.header["$EXTMAX"]
    # Texts reach beyond the lines by an estimate; below and to the left by less than their height.
    beyond = max((e.dxf.height for e in doc.modelspace().query("TEXT")), default=0.0)
    out = [box.extmin.x - low[0], box.extmin.y - low[1]]
    if min(out) < -LIMIT or max(out) > beyond or high[0] < box.extmax.x - LIMIT or high[1] < box.extmax.y - LIMIT:
        faults.append(f"{path}: header extents {low[:2]} {high[:2]}, drawn {box.extmin} {box.extmax}")
    if doc.dxfversion == "AC1015" and doc.units != 4:
        faults.append(f"{path}: unit {doc.units}, not 4 (mm)")
    closed = [e for e in lines if e.dxf.layer == "CUT" and e.is_closed]
    if doc.dxfversion == "AC1009":
        return [np.array([tuple(v.dxf.location)[:2] for v in e.vertices]) for e in closed], low
    return [np.array([p[:2] for p in e.get_points()]) for e in closed], low


def svg_contours(path, low, faults):
    """Closed paths of the group CUT in the drawing's own axes, y up."""
    text = path.read_text(encoding="utf-8")
    size = re.search(r'width="([\d.]+)mm" height="([\d.]+)mm" viewBox="0 0 ([\d.]+) ([\d.]+)"', text)
    if not size or size[1] != size[3] or size[2] != size[4]:
        faults.append(f"{path}: the size in mm is not that of the view box")
        return []
    height = float(size[2])
    group = re.search(r'<g id="CUT"[^>]*>(.*?)</g>', text, re.S)
    rings = []
    for d in re.findall(r'<path d="([^"]*) Z"', group[1] if group else ""):
        xy = np.array(re.findall(r"(-?[\d.]+) (-?[\d.]+)", d), dtype=float)
        rings.append(np.c_[xy[:, 0] - SVG_MARGIN + low[0], height - xy[:, 1] - SVG_MARGIN + low[1]])
    return rings


def main(folder):
    facts = json.loads((folder / "facts.json").read_text(encoding="utf-8"))
    cuts = {p["id"]: np.array(p["cut"]) for p in facts.get("panels", []) + facts.get("pieces", [])}
    faults, count = [], 0
    wanted = {}
    for roll in facts.get("rolls", []):
        placed = {}
        for p in roll["placements"]:
            turn = -1 if p["rotation"] == 180 else 1
            placed[p["panel"]] = turn * cuts[p["panel"]] + [p["x"], p["y"]]
        wanted[f"rolls/{roll['id']}"] = placed
    for p in facts.get("panels", []):
        wanted[f"panels/{p['id']}"] = {p["id"]: cuts[p["id"]]}
    for name, rings in wanted.items():
        kind, stem = name.split("/")
        low = (0.0, 0.0)
        for path in (folder / kind / f"{stem}.dxf", folder / kind / "dxf2000" / f"{stem}.dxf"):
            found, low = dxf_contours(path, faults)
            faults += compare(path, found, rings)
            count += len(found)
        path = folder / kind / f"{stem}.svg"
        found = svg_contours(path, low, faults)
        faults += compare(path, found, rings)
        count += len(found)
    for path in folder.glob("bites/**/*.dxf"):
        found, _ = dxf_contours(path, faults)
        count += len(found)
    for fault in faults:
        print(fault)
    print(f"{folder}: {count} contours compared, {len(faults)} faults")
    return 1 if faults or count == 0 else 0


sys.exit(main(Path(sys.argv[1])) if len(sys.argv) == 2 else 2)
