// The one module that knows three: draws a model on a canvas, turns it, says what is under the pointer. Draws on demand only.
import {
  AmbientLight,
  BufferAttribute,
  BufferGeometry,
  DirectionalLight,
  DoubleSide,
  Mesh,
  MeshLambertMaterial,
  OrthographicCamera,
  Raycaster,
  Scene,
  Vector2,
  Vector3,
  WebGLRenderer,
} from "three";
import { OrbitControls } from "three/addons/controls/OrbitControls.js";
import { LineSegments2 } from "three/addons/lines/LineSegments2.js";
import { LineSegmentsGeometry } from "three/addons/lines/LineSegmentsGeometry.js";
import type { Model, ModelLine } from "./buildModel.ts";
import { coarsen } from "./coarsen.ts";
import { BROWSER_CLOCK, createPace } from "./pace.ts";
import { density, inkOf, paintInPlace, type SceneInk, type SceneParts } from "./paintScene.ts";

export interface SceneView {
  /**
   * Puts a model of a job in; `colours` 3*nP red, green, blue of each point as shares of light, or null for plain cloth. Another job is shown whole,
   * the same one as it was turned.
   */
  show: (job: string, model: Model, colours: Float32Array | null) => void;
  /** Who is told after each drawing where things lie now; null: nobody. */
  watch: (onDraw: ((project: Project) => void) | null) => void;
  light: (ids: readonly (string | null)[]) => void;
  ink: (ink: SceneInk) => void;
  fit: () => void;
  /** Turns by angles (radians), moves closer by a factor. */
  turn: (around: number, over: number) => void;
  zoom: (factor: number) => void;
  /** Id under a point of the canvas (CSS pixels), or null. */
  pick: (x: number, y: number) => string | null;
  project: Project;
  resize: () => void;
}

function segmentsOf(line: ModelLine): Float32Array {
  const { points } = line;
  const out = new Float32Array(6 * Math.max(points.length - 1, 0));
  for (let i = 1; i < points.length; i++) out.set([...points[i - 1], ...points[i]], 6 * (i - 1));
  return out;
}

function buildMesh(model: Model, cloth: MeshLambertMaterial): Mesh<BufferGeometry, MeshLambertMaterial> {
  const geometry = new BufferGeometry();
  geometry.setAttribute("position", new BufferAttribute(model.position, 3));
  geometry.setAttribute("normal", new BufferAttribute(model.normal, 3));
  geometry.setAttribute("color", new BufferAttribute(new Float32Array(model.position.length), 3));
  geometry.setIndex(new BufferAttribute(model.triangles, 1));
  geometry.computeBoundingSphere();
  return new Mesh(geometry, cloth);
}

/** What all cloth is made of: a material of its own for each model would be set up anew each time. */
function buildCloth(): MeshLambertMaterial {
  return new MeshLambertMaterial({
    vertexColors: true,
    side: DoubleSide,
    polygonOffset: true,
    polygonOffsetFactor: 3,
    polygonOffsetUnits: 3,
  });
}

/**
 * A view on a canvas that lies on the page. Without a graphics card it takes the browser 0.1 s to make a canvas and to size it, so it
 * is sized before anything is drawn on it, and only when its size changes.
 * @throws Error where the browser draws no WebGL
 */
export function createScene(canvas: HTMLCanvasElement, ink: SceneInk): SceneView {
  Object.assign(canvas, { width: density() * canvas.clientWidth, height: density() * canvas.clientHeight });
  const renderer = new WebGLRenderer({ canvas, antialias: true, alpha: true });
  // asking for faults of the shaders would wait until they are compiled
  renderer.debug.checkShaderErrors = false;
  const scene = new Scene();
  const camera = new OrthographicCamera(-1, 1, 1, -1, 0.01, 1000);
  camera.up.set(0, 0, 1);
  const controls = new OrbitControls(camera, canvas);
  controls.enableDamping = false;
  const sun = new DirectionalLight("#ffffff", 2.1);
  scene.add(new AmbientLight("#ffffff", 1.25), sun);
  const parts: SceneParts = {
    model: null,
    mesh: null,
    whole: null,
    fewer: null,
    lines: [],
    inks: new Map(),
    colours: null,
    ink,
    lit: new Set(),
    stale: false,
    job: "",
    reach: [1, 1],
    turned: false,
  };
  let asked = 0;
  let told: ((project: Project) => void) | null = null;
  const drawNow = () => {
    asked = 0;
    if (parts.stale) paintInPlace(parts);
    const less = pace.begin();
    detailInPlace(parts, less);
    canvas.dataset.detail = less ? "less" : "all";
    sun.position.copy(camera.position).add(new Vector3(-3, -2, 8));
    renderer.render(scene, camera);
    told?.(project);
  };
  const draw = () => {
    if (asked === 0) asked = requestAnimationFrame(drawNow);
  };
  const pace = createPace(draw, BROWSER_CLOCK);
  controls.addEventListener("change", pace.move);
  controls.addEventListener("start", () => {
    parts.turned = true;
  });
  const size: CanvasSize = { wide: canvas.clientWidth, high: canvas.clientHeight };
  const project = projector(camera, size);
  const cloth = buildCloth();
  const view = handleView({
    canvas,
    size,
    camera,
    controls,
    renderer,
    scene,
    parts,
    cloth,
    project,
    draw,
    move: pace.move,
  });
  return {
    ...view,
    watch: (onDraw) => {
      told = onDraw;
    },
  };
}

/** Place of a point of the model on the canvas, CSS pixels, and its depth -1…1. */
export type Project = (at: readonly number[]) => { x: number; y: number; depth: number };

/** What the camera is framed for, CSS pixels: asked of the canvas at every point, the page would be laid out again each time. */
interface CanvasSize {
  wide: number;
  high: number;
}

function projector(camera: OrthographicCamera, size: CanvasSize): Project {
  const p = new Vector3();
  return (at) => {
    p.set(at[0], at[1], at[2]).project(camera);
    return { x: ((p.x + 1) / 2) * size.wide, y: ((1 - p.y) / 2) * size.high, depth: p.z };
  };
}

function clearInPlace(scene: Scene, parts: SceneParts): void {
  if (parts.mesh !== null) scene.remove(parts.mesh);
  parts.whole?.dispose();
  parts.fewer?.dispose();
  for (const { object } of parts.lines) {
    scene.remove(object);
    object.geometry.dispose();
  }
  parts.mesh = parts.whole = parts.fewer = null;
  parts.lines = [];
}

interface Stage {
  canvas: HTMLCanvasElement;
  size: CanvasSize;
  camera: OrthographicCamera;
  controls: OrbitControls;
  renderer: WebGLRenderer;
  scene: Scene;
  parts: SceneParts;
  cloth: MeshLambertMaterial;
  project: Project;
  draw: () => void;
  /** Draws since the view was turned. */
  move: () => void;
}

/** Puts the whole surface in its place, or fewer triangles over the same points. */
function detailInPlace(parts: SceneParts, less: boolean): void {
  const { model, mesh, whole } = parts;
  if (model === null || mesh === null || whole === null) return;
  if (less && parts.fewer === null) {
    parts.fewer = new BufferGeometry();
    for (const [name, values] of Object.entries(whole.attributes)) parts.fewer.setAttribute(name, values);
    parts.fewer.setIndex(new BufferAttribute(coarsen(model), 1));
    parts.fewer.boundingSphere = whole.boundingSphere;
  }
  mesh.geometry = (less ? parts.fewer : null) ?? whole;
}

/** Moves the point looked at to the middle of what the camera sees, and gives half its width and height. */
function centreInPlace({ camera, controls, parts }: Stage): [number, number] {
  const { model } = parts;
  if (model === null) return [1, 1];
  const right = new Vector3().setFromMatrixColumn(camera.matrixWorld, 0);
  const above = new Vector3().setFromMatrixColumn(camera.matrixWorld, 1);
  const x = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  const y = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  const [begun, raised] = [right, above].map((axis) => axis.dot(controls.target));
  const take = (a: number, b: number, c: number) => {
    const u = a * right.x + b * right.y + c * right.z - begun;
    const v = a * above.x + b * above.y + c * above.z - raised;
    if (u < x[0]) x[0] = u;
    if (u > x[1]) x[1] = u;
    if (v < y[0]) y[0] = v;
    if (v > y[1]) y[1] = v;
  };
  const { position } = model;
  for (let i = 0; i < position.length; i += 3) take(position[i], position[i + 1], position[i + 2]);
  for (const { points } of model.lines) for (const [a, b, c] of points) take(a, b, c);
  const shift = right.multiplyScalar((x[0] + x[1]) / 2).add(above.multiplyScalar((y[0] + y[1]) / 2));
  controls.target.add(shift);
  camera.position.add(shift);
  return [(x[1] - x[0]) / 2, (y[1] - y[0]) / 2];
}

function frameInPlace(stage: Stage): void {
  const { canvas, size, camera, renderer, parts } = stage;
  const [w, h] = [Math.max(canvas.clientWidth, 1), Math.max(canvas.clientHeight, 1)];
  Object.assign(size, { wide: w, high: h });
  const [wide, high] = [w, h].map((n) => Math.floor(density() * n));
  if (canvas.width !== wide || canvas.height !== high) renderer.setSize(wide, high, false);
  const radius = parts.mesh?.geometry.boundingSphere?.radius ?? 1;
  const [halfWide, halfHigh] = parts.reach;
  const half = 1.12 * Math.max(halfHigh, (halfWide * h) / w);
  Object.assign(camera, {
    left: (-half * w) / h,
    right: (half * w) / h,
    top: half,
    bottom: -half,
    near: 0.01,
    far: 30 * radius,
  });
  camera.updateProjectionMatrix();
}

function fitInPlace(stage: Stage): void {
  const { camera, controls, parts } = stage;
  const sphere = parts.mesh?.geometry.boundingSphere;
  if (!sphere) return;
  camera.zoom = 1;
  controls.target.copy(sphere.center);
  camera.position.copy(sphere.center).add(new Vector3(-0.55, -1, 0.85).normalize().multiplyScalar(8 * sphere.radius));
  camera.lookAt(sphere.center);
  camera.updateMatrixWorld();
  parts.reach = centreInPlace(stage);
  frameInPlace(stage);
  controls.update();
  stage.draw();
}

function handleView(stage: Stage): Omit<SceneView, "watch"> {
  const { size, camera, controls, scene, parts, draw, move } = stage;
  const ray = new Raycaster();
  const hit = (x: number, y: number) => {
    if (parts.mesh === null) return undefined;
    ray.setFromCamera(new Vector2((2 * x) / size.wide - 1, 1 - (2 * y) / size.high), camera);
    return ray.intersectObject(parts.mesh)[0];
  };
  return {
    show: (job, model, colours) => {
      clearInPlace(scene, parts);
      Object.assign(parts, {
        job,
        model,
        colours,
        mesh: buildMesh(model, stage.cloth),
        turned: parts.turned && job === parts.job,
      });
      if (parts.mesh !== null) scene.add(parts.mesh);
      parts.whole = parts.mesh?.geometry ?? null;
      parts.lines = model.lines
        .filter((l) => l.points.length > 1)
        .map((line) => {
          const object = new LineSegments2(
            new LineSegmentsGeometry().setPositions(segmentsOf(line)),
            inkOf(parts, line),
          );
          scene.add(object);
          return { line, object };
        });
      parts.stale = true;
      if (parts.turned) frameInPlace(stage);
      else fitInPlace(stage);
      draw();
    },
    light: (ids) => {
      const lit = new Set(ids.filter((id) => id !== null));
      if (lit.size === parts.lit.size && [...lit].every((id) => parts.lit.has(id))) return;
      parts.lit = lit;
      parts.stale = true;
      draw();
    },
    ink: (ink) => {
      if (JSON.stringify(ink) === JSON.stringify(parts.ink)) return;
      parts.ink = ink;
      parts.stale = true;
      draw();
    },
    fit: () => {
      parts.turned = false;
      fitInPlace(stage);
    },
    turn: (around, over) => {
      parts.turned = true;
      const arm = camera.position.clone().sub(controls.target);
      const flat = Math.hypot(arm.x, arm.y);
      const tilt = Math.min(Math.max(Math.atan2(arm.z, flat) + over, -1.55), 1.55);
      const angle = Math.atan2(arm.y, arm.x) + around;
      const r = arm.length();
      arm.set(r * Math.cos(tilt) * Math.cos(angle), r * Math.cos(tilt) * Math.sin(angle), r * Math.sin(tilt));
      camera.position.copy(controls.target).add(arm);
      controls.update();
      move();
    },
    zoom: (factor) => {
      parts.turned = true;
      camera.zoom = Math.min(Math.max(camera.zoom * factor, 0.2), 200);
      camera.updateProjectionMatrix();
      move();
    },
    pick: (x, y) => {
      const found = hit(x, y);
      const point = found?.face?.a ?? null;
      const id = point === null ? null : (parts.model?.owners[parts.model.owner[point] ?? 0] ?? null);
      return id === "" ? null : id;
    },
    project: stage.project,
    resize: () => {
      frameInPlace(stage);
      draw();
    },
  };
}
