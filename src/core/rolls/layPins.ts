// Pieces the job has pinned to a place on a roll: laid exactly there, or refused with the reason. Does not: nest the rest.
import { PlanError } from "../problem.ts";
import type { NestDecision } from "../records/job.ts";
import type { NestPiece } from "../records/roll.ts";
import type { LaidShape } from "./bed.ts";
import { PIN_GAP } from "./checkRolls.ts";
import { buildShape, turnRing } from "./nestShape.ts";
import type { OfferedRoll } from "./offerRolls.ts";
import { ringGap } from "./ringGap.ts";
import { usableWidth } from "./sortPieces.ts";

/** Depth of overlap that counts, mm. */
const TOUCH = 1e-3;

type Pin = NestDecision["pins"][number];

function refuse(code: string, pin: Pin, why: string, remedy: string): never {
  throw new PlanError(code, `The pin of ${pin.panel} on roll ${pin.roll} (${pin.x}, ${pin.y} mm) ${why}. ${remedy}`, [
    pin.panel,
    pin.roll,
  ]);
}

/** Checks that a pinned piece lies on its roll, off flaws, its right way round. */
function checkPlace(pin: Pin, laid: LaidShape, offer: OfferedRoll, piece: NestPiece, turn: boolean): void {
  const { roll } = offer;
  const hair = 1e-6;
  if (pin.rotation === 180 && !turn)
    refuse(
      "pin-turn",
      pin,
      "turns it by 180 degrees, which the job forbids",
      "Set its rotation to 0, or nest.turn to true.",
    );
  const x1 = laid.x + laid.shape.length;
  const y1 = laid.y + laid.shape.height;
  if (laid.x < roll.start - hair || x1 > roll.length + hair || laid.y < -hair || y1 > usableWidth(roll) + hair)
    refuse(
      "pin-place",
      pin,
      `lies at x ${laid.x.toFixed(1)} to ${x1.toFixed(1)}, y ${laid.y.toFixed(1)} to ${y1.toFixed(1)} mm, outside the usable cloth ` +
        `(x ${roll.start} to ${roll.length}, y 0 to ${usableWidth(roll)} mm)`,
      "Move the pin inside.",
    );
  for (const f of roll.flaws) {
    const flaw = { ring: Float64Array.from([0, 0, f.length, 0, f.length, f.width, 0, f.width]), x: f.x, y: f.y };
    if (ringGap({ ring: turnRing(piece.cut, pin.rotation), x: pin.x, y: pin.y }, flaw, 1, TOUCH) < 0)
      refuse("pin-flaw", pin, `lies on the flaw at x ${f.x}, y ${f.y} mm`, "Move the pin off the flaw.");
  }
}

/** Refuses two pins of one roll that overlap or are nearer than the gap. */
function checkPairs(pins: { pin: Pin; piece: NestPiece }[], gap: number): void {
  pins.forEach((a, i) => {
    for (const b of pins.slice(0, i)) {
      if (a.pin.roll !== b.pin.roll) continue;
      const placed = (p: typeof a) => ({ ring: turnRing(p.piece.cut, p.pin.rotation), x: p.pin.x, y: p.pin.y });
      const near = ringGap(placed(a), placed(b), gap + 1, TOUCH);
      if (near >= gap - PIN_GAP) continue;
      const how = near < 0 ? "overlap" : `are ${near.toFixed(2)} mm apart, less than the gap of ${gap} mm`;
      throw new PlanError(
        "pin-overlap",
        `The pinned pieces ${b.pin.panel} and ${a.pin.panel} on roll ${a.pin.roll} ${how}. Move one of the pins.`,
        [b.pin.panel, a.pin.panel],
        { gap, near },
      );
    }
  });
}

/**
 * The pinned shapes of each offered roll.
 * @throws PlanError pin-piece: no such piece, or pinned twice; pin-roll: no such roll, or of other cloth; pin-turn; pin-place:
 *   outside the usable cloth; pin-flaw; pin-overlap: two pins overlap or are nearer than the gap
 */
export function layPins(
  pieces: NestPiece[],
  offers: OfferedRoll[],
  options: Pick<NestDecision, "pins" | "gap" | "turn">,
): LaidShape[][] {
  const laid: LaidShape[][] = offers.map(() => []);
  const seen: { pin: Pin; piece: NestPiece }[] = [];
  for (const pin of options.pins) {
    const number = pieces.findIndex((p) => p.id === pin.panel);
    if (number < 0)
      refuse("pin-piece", pin, "names a piece that is not to be nested", "Take the pin out, or correct its name.");
    if (seen.some((s) => s.pin.panel === pin.panel)) refuse("pin-piece", pin, "pins it a second time", "Keep one pin.");
    const named = offers.map((o, i) => ({ o, i })).filter(({ o }) => o.roll.id === pin.roll);
    if (named.length === 0) refuse("pin-roll", pin, "names a roll that is not in the store", "Correct the roll's id.");
    const at = named.find(({ o }) => o.takes.has(number));
    if (!at) refuse("pin-roll", pin, "is on cloth of another fabric or batch", "Pin it to a roll of its own cloth.");
    const piece = pieces[number];
    const shape = buildShape(piece.cut, pin.rotation, `${piece.id}`);
    const lies: LaidShape = {
      piece: number,
      shape,
      x: pin.x + shape.offset[0],
      y: pin.y + shape.offset[1],
      pinned: true,
    };
    checkPlace(pin, lies, at.o, piece, options.turn);
    laid[at.i].push(lies);
    seen.push({ pin, piece });
  }
  checkPairs(seen, options.gap);
  return laid;
}
