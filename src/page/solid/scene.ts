// The surface as it is looked at: where the camera stands, what is under the pointer, where things lie on the canvas. The stage draws.
import {
  BufferAttribute,
  BufferGeometry,
  DoubleSide,
  Matrix4,
  Mesh,
  MeshBasicMaterial,
  OrthographicCamera,
  Raycaster,
  Sphere,
  Vector2,
  Vector3,
} from "three";
import { OrbitControls } from "three/addons/controls/OrbitControls.js";
import type { Model, ModelLine } from "./buildModel.ts";
import { openStage } from "./openStage.ts";
import type { Colours, DrawnLine, SceneInk, Sight, StageOrder, StageSize } from "./stageOrders.ts";

export interface SceneView {
  /** Puts a model of a job in; null colours: plain cloth. Another job is shown whole, the same one as it was turned. */
  show: (job: string, model: Model, colours: Colours | null) => void;
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
  /** Where things lie on the picture that is seen; null until what was put in last is drawn. */
  project: () => Project | null;
  resize: () => void;
}

/** Place of a point of the model on the canvas, CSS pixels, and its depth -1…1; `wide`: of the canvas. */
export interface Project {
  (at: readonly number[]): { x: number; y: number; depth: number };
  wide: number;
}

function drawnLine({ id, kind, points }: ModelLine): DrawnLine {
  const segments = new Float32Array(6 * Math.max(points.length - 1, 0));
  for (let i = 1; i < points.length; i++) {
    segments.set(points[i - 1], 6 * (i - 1));
    segments.set(points[i], 6 * i - 3);
  }
  return { id, kind, segments };
}

/** What the camera is framed for, CSS pixels: asked of the canvas at every point, the page would be laid out again each time. */
interface CanvasSize {
  wide: number;
  high: number;
}

/** Dots of the canvas. */
function dotsOf(canvas: HTMLCanvasElement): StageSize {
  const density = Math.min(devicePixelRatio, 2);
  const [wide, high] = [canvas.clientWidth, canvas.clientHeight].map((n) => Math.floor(density * Math.max(n, 1)));
  return { wide, high, density };
}

interface Parts {
  canvas: HTMLCanvasElement;
  size: CanvasSize;
  dots: StageSize;
  camera: OrthographicCamera;
  controls: OrbitControls;
  /** What the newest picture was drawn with: names go by what is seen. Null: what was put in last is not drawn yet. */
  seen: Matrix4 | null;
  frame: number;
  model: Model | null;
  /** Points the model is framed by, and a sphere about them. */
  outline: Vector3[];
  sphere: Sphere;
  /** For the pointer; never drawn. Null: nothing of this surface was pointed at yet. */
  mesh: Mesh<BufferGeometry, MeshBasicMaterial> | null;
  job: string;
  lit: readonly string[];
  ink: string;
  /** Half width and height of the model as first seen, m. */
  reach: [number, number];
  /** Whether a person has turned or moved the view: until then it shows all of whatever is put in. */
  turned: boolean;
  send: (order: StageOrder) => void;
}

/**
 * A view on a canvas that lies on the page and was drawn on by nobody yet.
 * @param broken is told when nothing can be drawn, with whether another canvas may be tried
 */
export function createScene(canvas: HTMLCanvasElement, ink: SceneInk, broken: (again: boolean) => void): SceneView {
  let told: ((project: Project) => void) | null = null;
  const camera = new OrthographicCamera(-1, 1, 1, -1, 0.01, 1000);
  camera.up.set(0, 0, 1);
  const controls = new OrbitControls(camera, canvas);
  controls.enableDamping = false;
  const dots = dotsOf(canvas);
  const parts: Parts = {
    canvas,
    size: { wide: Math.max(canvas.clientWidth, 1), high: Math.max(canvas.clientHeight, 1) },
    dots,
    camera,
    controls,
    seen: null,
    frame: 0,
    model: null,
    outline: [],
    sphere: new Sphere(),
    mesh: null,
    job: "",
    lit: [],
    ink: JSON.stringify(ink),
    reach: [1, 1],
    turned: false,
    send: openStage(
      canvas,
      { ink, size: dots },
      {
        drawn: ({ sight, less }) => {
          canvas.dataset.detail = less ? "less" : "all";
          if (sight.frame < parts.frame) return;
          parts.seen = seenBy(sight);
          told?.(project);
        },
        broken,
      },
    ),
  };
  const project = projector(parts);
  controls.addEventListener("change", () => {
    if (parts.turned) look(parts, true);
  });
  controls.addEventListener("start", () => {
    parts.turned = true;
  });
  return {
    ...handleModel(parts),
    ...handleCamera(parts),
    project: () => (parts.seen === null ? null : project),
    watch: (onDraw) => {
      told = onDraw;
    },
  };
}

function seenBy({ camera, projection }: Sight): Matrix4 {
  const inverse = new Matrix4().fromArray(camera).invert();
  return new Matrix4().fromArray(projection).multiply(inverse);
}

function sightOf({ camera, frame }: Parts): Sight {
  camera.updateMatrixWorld();
  return { camera: camera.matrixWorld.toArray(), projection: camera.projectionMatrix.toArray(), frame };
}

/** Has the surface drawn as the camera sees it now; `turned`: by a person, who may turn on. */
function look(parts: Parts, turned: boolean): void {
  parts.send({ kind: "sight", sight: sightOf(parts), turned });
}

function projector(parts: Parts): Project {
  const p = new Vector3();
  const place = (at: readonly number[]) => {
    p.set(at[0], at[1], at[2]).applyMatrix4(parts.seen ?? seenBy(sightOf(parts)));
    return { x: ((p.x + 1) / 2) * parts.size.wide, y: ((1 - p.y) / 2) * parts.size.high, depth: p.z };
  };
  return Object.assign(place, { wide: parts.size.wide });
}

/** So many points of a surface are enough to frame it by: its edges are taken whole, by their lines. */
const ENOUGH = 2000;

function outlineOf({ position, lines }: Model): Vector3[] {
  const out = lines.flatMap(({ points }) => points.map(([x, y, z]) => new Vector3(x, y, z)));
  const step = 3 * Math.ceil(position.length / 3 / ENOUGH);
  for (let i = 0; i < position.length; i += step) out.push(new Vector3().fromArray(position, i));
  return out;
}

/** Moves the point looked at to the middle of what the camera sees, and gives half its width and height. */
function centreInPlace({ camera, controls, outline }: Parts): [number, number] {
  const [shift, halves] = [new Vector3(), [1, 1]];
  for (const k of [0, 1]) {
    const axis = new Vector3().setFromMatrixColumn(camera.matrixWorld, k);
    let [least, most] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
    for (const p of outline) {
      const along = axis.dot(p);
      if (along < least) least = along;
      if (along > most) most = along;
    }
    shift.addScaledVector(axis, (least + most) / 2 - axis.dot(controls.target));
    halves[k] = (most - least) / 2;
  }
  controls.target.add(shift);
  camera.position.add(shift);
  return [halves[0], halves[1]];
}

/** Frames the model for the size the canvas has now. */
function frameInPlace(parts: Parts): void {
  const { canvas, size, camera, sphere, reach } = parts;
  const [w, h] = [Math.max(canvas.clientWidth, 1), Math.max(canvas.clientHeight, 1)];
  Object.assign(size, { wide: w, high: h });
  parts.frame++;
  parts.seen = null;
  const dots = dotsOf(canvas);
  if (JSON.stringify(dots) !== JSON.stringify(parts.dots)) {
    parts.dots = dots;
    parts.send({ kind: "size", size: dots });
  }
  const half = 1.12 * Math.max(reach[1], (reach[0] * h) / w);
  Object.assign(camera, {
    left: (-half * w) / h,
    right: (half * w) / h,
    top: half,
    bottom: -half,
    near: 0.01,
    far: 30 * sphere.radius,
  });
  camera.updateProjectionMatrix();
}

/** Shows all of the model, as it is first seen. */
function fitInPlace(parts: Parts): void {
  const { camera, controls, sphere, outline } = parts;
  if (outline.length === 0) return;
  camera.zoom = 1;
  controls.target.copy(sphere.center);
  camera.position.copy(sphere.center).add(new Vector3(-0.55, -1, 0.85).normalize().multiplyScalar(8 * sphere.radius));
  camera.lookAt(sphere.center);
  camera.updateMatrixWorld();
  parts.reach = centreInPlace(parts);
  frameInPlace(parts);
  controls.update();
}

function isSameSurface(a: Model | null, b: Model): boolean {
  return a !== null && a.position === b.position && a.triangles === b.triangles && a.owner === b.owner;
}

function takeInPlace(parts: Parts, model: Model): void {
  if (!isSameSurface(parts.model, model)) parts.mesh = null;
  parts.model = model;
  parts.outline = outlineOf(model);
  parts.sphere.setFromPoints(parts.outline);
}

function meshOf({ position, triangles }: Model): Mesh<BufferGeometry, MeshBasicMaterial> {
  const geometry = new BufferGeometry();
  geometry.setAttribute("position", new BufferAttribute(position, 3));
  geometry.setIndex(new BufferAttribute(triangles, 1));
  return new Mesh(geometry, new MeshBasicMaterial({ side: DoubleSide }));
}

function handleModel(parts: Parts): Pick<SceneView, "show" | "light" | "ink" | "pick"> {
  const { size, camera, send } = parts;
  const ray = new Raycaster();
  return {
    show: (job, model, colours) => {
      const { position, normal, triangles, owner, owners } = model;
      const surface = isSameSurface(parts.model, model) ? null : { position, normal, triangles, owner, owners };
      const lines =
        parts.model?.lines === model.lines ? null : model.lines.filter((l) => l.points.length > 1).map(drawnLine);
      parts.turned &&= job === parts.job;
      parts.job = job;
      takeInPlace(parts, model);
      if (parts.turned) frameInPlace(parts);
      else fitInPlace(parts);
      send({ kind: "show", surface, lines, colours, sight: sightOf(parts) });
    },
    light: (given) => {
      const ids = given.filter((id) => id !== null);
      if (ids.length === parts.lit.length && ids.every((id) => parts.lit.includes(id))) return;
      parts.lit = ids;
      send({ kind: "light", ids });
    },
    ink: (ink) => {
      const words = JSON.stringify(ink);
      if (words === parts.ink) return;
      parts.ink = words;
      send({ kind: "ink", ink });
    },
    pick: (x, y) => {
      if (parts.model === null) return null;
      const { owners, owner } = parts.model;
      parts.mesh ??= meshOf(parts.model);
      ray.setFromCamera(new Vector2((2 * x) / size.wide - 1, 1 - (2 * y) / size.high), camera);
      const point = ray.intersectObject(parts.mesh)[0]?.face?.a ?? null;
      return (point !== null && owners[owner[point]]) || null;
    },
  };
}

function handleCamera(parts: Parts): Pick<SceneView, "fit" | "turn" | "zoom" | "resize"> {
  const { camera, controls } = parts;
  return {
    fit: () => {
      parts.turned = false;
      fitInPlace(parts);
      look(parts, false);
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
      look(parts, true);
    },
    zoom: (factor) => {
      parts.turned = true;
      camera.zoom = Math.min(Math.max(camera.zoom * factor, 0.2), 200);
      camera.updateProjectionMatrix();
      look(parts, true);
    },
    resize: () => {
      frameInPlace(parts);
      look(parts, false);
    },
  };
}
