// A DXF reader of its own for what dxf-parser leaves out: raw tags, so that order, doubled points and number shapes can be seen.
import { spawnSync } from "node:child_process";
import { existsSync } from "node:fs";
import type { Facts, Vec2 } from "../../../src/core/records/facts.ts";

export interface Tag {
  code: number;
  value: string;
}

export function readTags(text: string): Tag[] {
  const lines = text.split("\r\n");
  if (lines.at(-1) !== "") throw new Error("the last line is not ended");
  lines.pop();
  if (lines.length % 2 !== 0) throw new Error("a tag without its value");
  const tags: Tag[] = [];
  for (let i = 0; i < lines.length; i += 2) {
    if (!/^ *-?\d+$/.test(lines[i]!)) throw new Error(`line ${i + 1} is no group code: ${lines[i]}`);
    tags.push({ code: Number(lines[i]), value: lines[i + 1]! });
  }
  return tags;
}

/** Runs of tags that start with code 0. */
export function entitiesOf(tags: Tag[]): Tag[][] {
  const start = tags.findIndex((t) => t.code === 2 && t.value === "ENTITIES");
  const out: Tag[][] = [];
  for (const t of tags.slice(start + 1)) {
    if (t.code === 0) out.push([t]);
    else out.at(-1)?.push(t);
  }
  return out;
}

/** A Python that has ezdxf, where there is one. */
export const PYTHON = "/usr/bin/python3";
export const hasEzdxf = existsSync(PYTHON) && spawnSync(PYTHON, ["-c", "import ezdxf"]).status === 0;

/** Cut outlines of a roll as they must lie. */
export function placedCuts(facts: Facts, roll: number): Vec2[][] {
  return facts.rolls![roll]!.placements.map((p) => {
    const cut = facts.panels!.find((q) => q.id === p.panel)?.cut ?? facts.pieces!.find((q) => q.id === p.panel)!.cut;
    const s = p.rotation === 180 ? -1 : 1;
    return cut.map(([x, y]): Vec2 => [p.x + s * x, p.y + s * y]);
  });
}

/** Greatest distance from each point of a to the closed outline b, and back. */
export function apart(a: Vec2[], b: Vec2[]): number {
  const oneWay = (from: Vec2[], to: Vec2[]) =>
    Math.max(
      ...from.map((p) =>
        Math.min(
          ...to.map((q, i) => {
            const r = to[(i + 1) % to.length]!;
            const l2 = (r[0] - q[0]) ** 2 + (r[1] - q[1]) ** 2;
            const t =
              l2 === 0
                ? 0
                : Math.min(1, Math.max(0, ((p[0] - q[0]) * (r[0] - q[0]) + (p[1] - q[1]) * (r[1] - q[1])) / l2));
            return Math.hypot(p[0] - q[0] - t * (r[0] - q[0]), p[1] - q[1] - t * (r[1] - q[1]));
          }),
        ),
      ),
    );
  return Math.max(oneWay(a, b), oneWay(b, a));
}

/** Points of a run with its arcs cut up, by the textbook formula of the bulge. */
export function flattened(points: readonly Vec2[], bulges: readonly number[], closed: boolean, parts = 512): Vec2[] {
  return points.flatMap((a, i): Vec2[] => {
    const b = points[(i + 1) % points.length]!;
    const bulge = bulges[i] ?? 0;
    if (bulge === 0 || (!closed && i === points.length - 1)) return [a];
    const angle = 4 * Math.atan(bulge);
    const chord = Math.hypot(b[0] - a[0], b[1] - a[1]);
    const radius = chord / 2 / Math.sin(angle / 2);
    const heading = Math.atan2(b[1] - a[1], b[0] - a[0]) - angle / 2;
    return Array.from({ length: parts }, (_, k): Vec2 => {
      const t = (angle * k) / parts;
      return [
        a[0] + radius * (Math.sin(heading + t) - Math.sin(heading)),
        a[1] + radius * (Math.cos(heading) - Math.cos(heading + t)),
      ];
    });
  });
}
