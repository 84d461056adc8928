// A small found form for the page: a minimal-like saddle with straight clamped sides, all of its rim held.

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
  nest: { steps: 20 },
};

/** Files as a person drops them. */
export function smallFiles(job: object = SMALL_JOB): { name: string; mimeType: string; buffer: Buffer }[] {
  return [
    { name: "job.json", mimeType: "application/json", buffer: Buffer.from(JSON.stringify(job)) },
    { name: "booth.obj", mimeType: "text/plain", buffer: Buffer.from(smallForm()) },
  ];
}
