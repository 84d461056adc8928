// Small forms for the page, planned in a second or two: a clamped saddle, and a sail hung from four corners.

/** OBJ text of a saddle of 6 x 4 m with n strips each way; the rim is named side by side. */
export function smallForm(n = 8): string {
  const lines: string[] = ["# saddle, metres, z up"];
  const at = (i: number, j: number) => j * (n + 1) + i + 1;
  for (let j = 0; j <= n; j++) {
    for (let i = 0; i <= n; i++) {
      const [x, y] = [(6 * i) / n, (4 * j) / n];
      lines.push(`v ${x} ${y} ${1.2 * ((x / 6) * (1 - y / 4) + (1 - x / 6) * (y / 4))}`);
    }
  }
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) lines.push(`f ${at(i, j)} ${at(i + 1, j)} ${at(i + 1, j + 1)} ${at(i, j + 1)}`);
  }
  const run = (of: (k: number) => number) => Array.from({ length: n + 1 }, (_, k) => of(k)).join(" ");
  lines.push("g south", `l ${run((k) => at(k, 0))}`, "g east", `l ${run((k) => at(n, k))}`);
  lines.push("g north", `l ${run((k) => at(n - k, n))}`, "g west", `l ${run((k) => at(0, n - k))}`);
  return `${lines.join("\n")}\n`;
}

/** A job for it, clamped all round. */
export const SMALL_JOB = {
  format: "seamstay-job",
  version: 1,
  title: "Ticket booth",
  mesh: { file: "booth.obj", unit: "m", up: "z" },
  edges: { default: { kind: "clamped" } },
  rolls: [{ id: "R1", width: 1500, selvedge: 25, length: 60_000 }],
  nest: { steps: 1 },
};

/** OBJ text of a sail of 6 x 5 m between two high and two low corners, n strips each way, its edges drawn in; not in balance yet. */
export function smallSail(n = 4): string {
  const lines: string[] = ["# sail, metres, z up"];
  const at = (i: number, j: number) => j * (n + 1) + i + 1;
  for (let j = 0; j <= n; j++) {
    for (let i = 0; i <= n; i++) {
      const [u, v] = [i / n, j / n];
      const x = 6 * u + 2 * v * (1 - v) * (1 - 2 * u);
      const y = 5 * v + 1.8 * u * (1 - u) * (1 - 2 * v);
      lines.push(`v ${x.toFixed(4)} ${y.toFixed(4)} ${(1.6 * (u * (1 - v) + (1 - u) * v) + 3).toFixed(4)}`);
    }
  }
  for (let j = 0; j < n; j++) {
    for (let i = 0; i < n; i++) lines.push(`f ${at(i, j)} ${at(i + 1, j)} ${at(i + 1, j + 1)} ${at(i, j + 1)}`);
  }
  const run = (of: (k: number) => number) => Array.from({ length: n + 1 }, (_, k) => of(k)).join(" ");
  lines.push("g south", `l ${run((k) => at(k, 0))}`, "g east", `l ${run((k) => at(n, k))}`);
  lines.push("g north", `l ${run((k) => at(n - k, n))}`, "g west", `l ${run((k) => at(0, n - k))}`);
  const corners = [at(0, 0), at(n, 0), at(n, n), at(0, n)];
  lines.push(...corners.flatMap((v, k) => [`g C${k + 1}`, `p ${v}`]));
  return `${lines.join("\n")}\n`;
}

/** A job for it: settled, three strips, two stages. */
export const SAIL_JOB = {
  format: "seamstay-job",
  version: 1,
  title: "Kiosk sail",
  mesh: { file: "sail.obj", unit: "m", up: "z" },
  settle: true,
  edges: { default: { kind: "cable", force: 20 } },
  seams: { layout: "bands", from: "south", to: "north", count: 3 },
  nest: { steps: 1 },
  rig: { stages: [0.5, 1] },
};

function files(job: { mesh: { file: string } }, mesh: string) {
  return [
    { name: "job.json", mimeType: "application/json", buffer: Buffer.from(JSON.stringify(job)) },
    { name: job.mesh.file, mimeType: "text/plain", buffer: Buffer.from(mesh) },
  ];
}

/** Files as a person drops them: the saddle. */
export const smallFiles = (job = SMALL_JOB) => files(job, smallForm());

/** The sail. */
export const sailFiles = (job: typeof SAIL_JOB = SAIL_JOB) => files(job, smallSail());
