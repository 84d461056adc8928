// What draws: a surface, its lines, its colours and the light, on a canvas it is given; told what to show by orders. Draws on demand
// only. Runs in a worker of its own, or in the page where the browser hands no canvas over.
import {
  AmbientLight,
  BufferAttribute,
  BufferGeometry,
  Camera,
  DirectionalLight,
  DoubleSide,
  Mesh,
  MeshLambertMaterial,
  Scene,
  Vector3,
  WebGLRenderer,
} from "three";
import { LineSegments2 } from "three/addons/lines/LineSegments2.js";
import { LineSegmentsGeometry } from "three/addons/lines/LineSegmentsGeometry.js";
import { coarsen } from "./coarsen.ts";
import { BROWSER_CLOCK, createPace } from "./pace.ts";
import { inkOf, paintInPlace, type StageParts } from "./paintScene.ts";
import type { DrawnLine, Sight, StageBegin, StageOrder, StageWord, Surface } from "./stageOrders.ts";

function buildGeometry(surface: Surface): BufferGeometry {
  const geometry = new BufferGeometry();
  geometry.setAttribute("position", new BufferAttribute(surface.position, 3));
  geometry.setAttribute("normal", new BufferAttribute(surface.normal, 3));
  geometry.setAttribute("color", new BufferAttribute(new Float32Array(surface.position.length), 3));
  geometry.setIndex(new BufferAttribute(surface.triangles, 1));
  geometry.computeBoundingSphere();
  return geometry;
}

/** What all cloth is made of: a material of its own for each surface would be set up anew each time. */
function buildCloth(): MeshLambertMaterial {
  return new MeshLambertMaterial({
    vertexColors: true,
    side: DoubleSide,
    polygonOffset: true,
    polygonOffsetFactor: 3,
    polygonOffsetUnits: 3,
  });
}

function clearSurfaceInPlace(scene: Scene, parts: StageParts): void {
  if (parts.mesh !== null) scene.remove(parts.mesh);
  parts.whole?.dispose();
  parts.fewer?.dispose();
  parts.mesh = parts.whole = parts.fewer = null;
}

function clearLinesInPlace(scene: Scene, parts: StageParts): void {
  for (const { object } of parts.lines) {
    scene.remove(object);
    object.geometry.dispose();
  }
  parts.lines = [];
}

/** Puts the whole surface in its place, or fewer triangles over the same points. */
function detailInPlace(parts: StageParts, less: boolean): void {
  const { surface, mesh, whole } = parts;
  if (surface === null || mesh === null || whole === null) return;
  if (less && parts.fewer === null) {
    parts.fewer = new BufferGeometry();
    for (const [name, values] of Object.entries(whole.attributes)) parts.fewer.setAttribute(name, values);
    parts.fewer.setIndex(new BufferAttribute(coarsen(surface), 1));
    parts.fewer.boundingSphere = whole.boundingSphere;
  }
  mesh.geometry = (less ? parts.fewer : null) ?? whole;
}

function lookInPlace(camera: Camera, { camera: matrix, projection }: Sight): void {
  camera.matrixWorld.fromArray(matrix);
  camera.matrixWorldInverse.copy(camera.matrixWorld).invert();
  camera.projectionMatrix.fromArray(projection);
  camera.projectionMatrixInverse.copy(camera.projectionMatrix).invert();
}

/**
 * A stage on a canvas. Without a graphics card it takes the browser 0.1 s to make a canvas and to size it, so it is sized before
 * anything is drawn on it, and only when its size changes.
 * @returns what takes orders; nothing is drawn before the first sight
 * @throws Error where the browser draws no WebGL here
 */
export function createStage(
  canvas: HTMLCanvasElement | OffscreenCanvas,
  begin: Omit<StageBegin, "canvas">,
  tell: (word: StageWord) => void,
): (order: StageOrder) => void {
  Object.assign(canvas, { width: begin.size.wide, height: begin.size.high });
  const renderer = new WebGLRenderer({ canvas, antialias: true, alpha: true });
  // asking for faults of the shaders would wait until they are compiled
  renderer.debug.checkShaderErrors = false;
  const scene = new Scene();
  const camera = new Camera();
  camera.matrixWorldAutoUpdate = false;
  const sun = new DirectionalLight("#ffffff", 2.1);
  scene.add(new AmbientLight("#ffffff", 1.25), sun);
  const cloth = buildCloth();
  const parts: StageParts = {
    surface: null,
    mesh: null,
    whole: null,
    fewer: null,
    lines: [],
    inks: new Map(),
    colours: null,
    ink: begin.ink,
    density: begin.size.density,
    lit: new Set(),
    stale: false,
  };
  let sight: Sight | null = null;
  let asked = 0;
  const drawNow = () => {
    asked = 0;
    if (sight === null) return;
    if (parts.stale) paintInPlace(parts);
    const less = pace.begin();
    detailInPlace(parts, less);
    sun.position.setFromMatrixPosition(camera.matrixWorld).add(new Vector3(-3, -2, 8));
    renderer.render(scene, camera);
    tell({ kind: "drawn", sight, less });
  };
  const draw = () => {
    if (asked === 0) asked = requestAnimationFrame(drawNow);
  };
  const pace = createPace(draw, BROWSER_CLOCK);
  const show = (surface: Surface) => {
    clearSurfaceInPlace(scene, parts);
    const whole = buildGeometry(surface);
    const mesh = new Mesh(whole, cloth);
    scene.add(mesh);
    Object.assign(parts, { surface, whole, mesh });
  };
  const drawLines = (lines: readonly DrawnLine[]) => {
    clearLinesInPlace(scene, parts);
    parts.lines = lines.map((line) => {
      const object = new LineSegments2(new LineSegmentsGeometry().setPositions(line.segments), inkOf(parts, line));
      scene.add(object);
      return { line, object };
    });
  };
  const look = (next: Sight) => {
    sight = next;
    lookInPlace(camera, next);
  };
  const paint = () => {
    parts.stale = true;
    draw();
  };
  return (order) => {
    switch (order.kind) {
      case "show":
        if (order.surface !== null) show(order.surface);
        if (order.lines !== null) drawLines(order.lines);
        parts.colours = order.colours;
        look(order.sight);
        return paint();
      case "light":
        parts.lit = new Set(order.ids);
        return paint();
      case "ink":
        parts.ink = order.ink;
        return paint();
      case "sight":
        look(order.sight);
        return order.turned ? pace.move() : draw();
      case "size":
        parts.density = order.size.density;
        renderer.setSize(order.size.wide, order.size.high, false);
        return paint();
    }
  };
}
