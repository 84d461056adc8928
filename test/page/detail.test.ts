// Less is drawn of the surface while it is turned where frames come slowly, and all of it once it is still.
import { afterAll, beforeAll, describe, expect, it } from "vitest";
import { coarsen } from "../../src/page/solid/coarsen.ts";
import { createPace, type PaceClock } from "../../src/page/solid/pace.ts";
import { type Bench, LONG, planned, SOON, setUp } from "./bench.ts";
import { smallFiles } from "./smallForm.ts";

/** A clock that is wound by hand; a frame takes `frame` ms. */
function windUp(frame: { ms: number }) {
  let time = 0;
  const todo: { at: number; then: () => void }[] = [];
  const clock: PaceClock = {
    now: () => time,
    nextFrame: (then) => void todo.push({ at: time + frame.ms, then }),
    later: (then, ms) => void todo.push({ at: time + ms, then }),
  };
  /** Lets time pass, what falls due in its order. */
  const pass = (ms: number) => {
    const end = time + ms;
    for (;;) {
      todo.sort((a, b) => a.at - b.at);
      const first = todo[0];
      if (first === undefined || first.at > end) break;
      todo.shift();
      time = Math.max(time, first.at);
      first.then();
    }
    time = end;
  };
  return { clock, pass };
}

/** A view that is drawn at the next frame after it is asked for; what each drawing showed. */
function viewAt(frame: { ms: number }) {
  const { clock, pass } = windUp(frame);
  const drawn: ("all" | "less")[] = [];
  let asked = false;
  const pace = createPace(() => {
    if (asked) return;
    asked = true;
    clock.nextFrame(() => {
      asked = false;
      drawn.push(pace.begin() ? "less" : "all");
    });
  }, clock);
  return { pace, pass, drawn };
}

describe("pace", () => {
  it.each([17, 33.4])("frames of %d ms, 30 a second or more: all is drawn, turned or still", (ms) => {
    const { pace, pass, drawn } = viewAt({ ms });
    for (let i = 0; i < 20; i++) {
      pace.move();
      pass(ms);
    }
    pass(2000);
    expect(drawn.length).toBeGreaterThanOrEqual(20);
    expect(new Set(drawn)).toEqual(new Set(["all"]));
  });

  it.each([40, 60, 120, 400, 1500])(
    "frames of %d ms: less while it is turned, all at the end, and then nothing more",
    (ms) => {
      const { pace, pass, drawn } = viewAt({ ms });
      for (let i = 0; i < 20; i++) {
        pace.move();
        pass(ms);
      }
      expect(drawn.slice(2)).toEqual(drawn.slice(2).map(() => "less"));
      pass(3 * ms + 2000);
      expect(drawn.at(-1)).toBe("all");
      const settled = drawn.length;
      pass(10_000);
      expect(drawn.length).toBe(settled);
    },
  );

  it("frames that come fast again show all again", () => {
    const frame = { ms: 200 };
    const { pace, pass, drawn } = viewAt(frame);
    const turn = () => {
      for (let i = 0; i < 10; i++) {
        pace.move();
        pass(frame.ms);
      }
    };
    turn();
    expect(drawn.at(-1)).toBe("less");
    frame.ms = 17;
    pass(2000);
    expect(drawn.at(-1)).toBe("all");
    drawn.length = 0;
    turn();
    expect(new Set(drawn)).toEqual(new Set(["all"]));
  });
});

/** A saddle of n by n squares in two patches that meet in the middle, each with its own points there. */
function saddle(n: number) {
  const [position, triangles, owner]: number[][] = [[], [], []];
  for (const half of [0, 1]) {
    const first = owner.length;
    for (let j = 0; j <= n; j++) {
      for (let i = 0; i <= n / 2; i++) {
        const [x, y] = [(half * n) / 2 + i, j].map((k) => k / n);
        position.push(x, y, x * y);
        owner.push(half);
      }
    }
    const at = (i: number, j: number) => first + j * (n / 2 + 1) + i;
    for (let j = 0; j < n; j++) {
      for (let i = 0; i < n / 2; i++)
        triangles.push(at(i, j), at(i + 1, j), at(i + 1, j + 1), at(i, j), at(i + 1, j + 1), at(i, j + 1));
    }
  }
  return {
    position: Float32Array.from(position),
    triangles: Uint32Array.from(triangles),
    owner: Uint16Array.from(owner),
  };
}

/** Area over the ground of triangles. */
function groundOf({ position }: { position: Float32Array }, triangles: Uint32Array): number {
  let sum = 0;
  for (let t = 0; t < triangles.length; t += 3) {
    const [a, b, c] = [0, 1, 2].map((k) => [0, 1].map((d) => position[3 * triangles[t + k] + d]));
    sum += Math.abs((b[0] - a[0]) * (c[1] - a[1]) - (c[0] - a[0]) * (b[1] - a[1])) / 2;
  }
  return sum;
}

describe("fewer triangles", () => {
  it("100 000 become less than 10 000 that cover the same ground, each within its own patch", () => {
    const surface = saddle(224);
    expect(surface.triangles.length / 3).toBe(100_352);
    const fewer = coarsen(surface);
    expect(fewer.length % 3).toBe(0);
    expect(fewer.length / 3).toBeLessThan(10_000);
    expect(fewer.length / 3).toBeGreaterThan(1000);
    // the rim gives way by at most a cell
    expect(groundOf(surface, fewer)).toBeGreaterThan(0.94);
    expect(groundOf(surface, fewer)).toBeLessThan(1.01);
    for (let t = 0; t < fewer.length; t += 3)
      expect(new Set([0, 1, 2].map((k) => surface.owner[fewer[t + k]])).size).toBe(1);
  });

  it("stays closed where patches meet: each point of a meeting edge is a point of both", () => {
    const surface = saddle(224);
    const fewer = coarsen(surface);
    const edges = new Map<string, number>();
    const name = (p: number) => [0, 1, 2].map((k) => surface.position[3 * p + k]).join(" ");
    for (let t = 0; t < fewer.length; t += 3) {
      for (let k = 0; k < 3; k++) {
        const key = [name(fewer[t + k]), name(fewer[t + ((k + 1) % 3)])].sort().join(" | ");
        edges.set(key, (edges.get(key) ?? 0) + 1);
      }
    }
    const open = [...edges]
      .filter(([, n]) => n === 1)
      .map(([key]) => key.split(" | ").map((p) => Number(p.split(" ")[0])));
    // edges of one triangle lie along the outer rim only, nowhere near the line the patches share
    const inner = open.filter((xs) => xs.every((x) => Math.abs(x - 0.5) < 0.02));
    expect(inner.length).toBeLessThanOrEqual(2);
  });

  it("few triangles are left as they are", () => {
    const surface = saddle(8);
    expect(coarsen(surface)).toEqual(surface.triangles);
  });
});

let bench: Bench;
beforeAll(async () => {
  bench = await setUp();
}, LONG);
afterAll(() => bench?.close());

describe("the surface where frames come slowly", { timeout: LONG }, () => {
  it("turned with the mouse it shows less, let be it shows all", async () => {
    const { page, context, faults } = await bench.open();
    // drawn in the page, where every frame takes longer than a slow one
    await page.addInitScript(() => {
      Reflect.deleteProperty(HTMLCanvasElement.prototype, "transferControlToOffscreen");
      const own = requestAnimationFrame;
      window.requestAnimationFrame = (then) =>
        own(() => {
          const end = performance.now() + 70;
          while (performance.now() < end);
          then(performance.now());
        });
    });
    await page.reload();
    await page.getByLabel("Choose files").setInputFiles(smallFiles());
    await planned(page);
    const canvas = page.locator("canvas");
    const detail = () => canvas.getAttribute("data-detail");
    await expect.poll(detail, SOON).toBe("all");
    await page.evaluate(() => {
      const told: string[] = [];
      Object.assign(window, { told });
      const canvas = document.querySelector("canvas");
      if (canvas === null) throw new Error("no canvas");
      new MutationObserver(() => told.push(canvas.dataset.detail ?? "")).observe(canvas, {
        attributeFilter: ["data-detail"],
      });
    });
    const box = await canvas.boundingBox();
    if (box === null) throw new Error("no canvas");
    const [x, y] = [box.x + box.width / 2, box.y + box.height / 2];
    await page.mouse.move(x, y);
    await page.mouse.down();
    const told = () => page.evaluate<string[]>("window.told");
    // as many moves as it takes: on a busy machine they may come slowly
    let k = 0;
    await expect
      .poll(
        async () => {
          await page.mouse.move(x + 40 * Math.sin(++k), y);
          return told();
        },
        { ...SOON, interval: 10 },
      )
      .toContain("less");
    await page.mouse.up();
    await expect.poll(detail, SOON).toBe("all");
    expect(faults).toEqual([]);
    await context.close();
  });
});
