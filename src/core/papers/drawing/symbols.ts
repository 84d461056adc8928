// The few symbols of a cut file, as small models laid out once and placed by turning and moving: point cross,
// 1000 mm bar. Dense outlines never come this way.
import makerjs from "makerjs";
import type { Vec2 } from "../../records/facts.ts";
import { addStrokeInPlace, type Drawing, type Layer } from "./drawing.ts";

type Model = makerjs.IModel;

/** Upright cross of two lines, `size` across. */
export function cross(size: number): Model {
  return {
    paths: {
      level: new makerjs.paths.Line([-size / 2, 0], [size / 2, 0]),
      upright: new makerjs.paths.Line([0, -size / 2], [0, size / 2]),
    },
  };
}

/** Bar of the given length from the origin along +x with a tick every tenth; outer edge to outer edge is the length. */
export function scaleBar(length: number): Model {
  const height = length / 50;
  const ticks: makerjs.IPathMap = {};
  for (let i = 1; i < 10; i++) {
    const x = (length * i) / 10;
    ticks[`tick${i}`] = new makerjs.paths.Line([x, 0], [x, i === 5 ? height : height / 2]);
  }
  return { models: { frame: new makerjs.models.Rectangle(length, height), ticks: { paths: ticks } } };
}

/** Draws a symbol turned by `rotation` degrees and moved to `at`. */
export function addSymbolInPlace(drawing: Drawing, model: Model, layer: Layer, at: Vec2, rotation: number): void {
  const placed = makerjs.model.moveRelative(makerjs.model.rotate(makerjs.cloneObject(model), rotation), at);
  const draw = (points: makerjs.IPoint[], closed: boolean) =>
    addStrokeInPlace(drawing, { layer, points: points.map((p): Vec2 => [p[0], p[1]]), closed });
  makerjs.model.findChains(placed, (chains, loose) => {
    for (const chain of chains) draw(makerjs.chain.toKeyPoints(chain), chain.endless === true);
    // Ticks meet nothing at their ends: they belong to no chain.
    for (const walk of loose) {
      const points = makerjs.path.toKeyPoints(walk.pathContext);
      draw(
        points.map((p) => makerjs.point.add(p, walk.offset)),
        false,
      );
    }
  });
}
