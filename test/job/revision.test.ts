import { describe, expect, it } from "vitest";
import { leastJob } from "../../src/core/job/leastJob.ts";
import { readJob } from "../../src/core/job/readJob.ts";
import { measureRevision, writeCanonicalJson } from "../../src/core/job/revision.ts";
import { catalogues } from "./catalogueFiles.ts";

const mesh = new TextEncoder().encode("v 0 0 0\n");
const revise = (given: unknown, bytes = mesh, from = catalogues) =>
  measureRevision(given, readJob(given, from).job, bytes);

describe("revision", () => {
  it("is eight hexadecimal digits", () => {
    expect(revise(leastJob("form.obj", "Bay 2"))).toMatch(/^[0-9A-F]{8}$/);
  });

  it("does not depend on how the job is written down", () => {
    const turned = { title: "Bay 2", mesh: { file: "form.obj" }, version: 1, format: "seamstay-job" };
    expect(revise(turned)).toBe(revise(leastJob("form.obj", "Bay 2")));
  });

  it("changes with the job, the mesh and the catalogue entry used, not with an entry that is not used", () => {
    const least = leastJob("form.obj", "Bay 2");
    const first = revise(least);
    expect(revise(leastJob("form.obj", "Bay 3"))).not.toBe(first);
    expect(revise(least, new TextEncoder().encode("v 0 0 1\n"))).not.toBe(first);
    const change = (id: string) => {
      const entry = catalogues.fabrics[id];
      const fabric = { ...entry.fabric, Ew: entry.fabric.Ew + 1 };
      return { ...catalogues, fabrics: { ...catalogues.fabrics, [id]: { ...entry, fabric } } };
    };
    expect(revise(least, mesh, change(catalogues.defaultFabric))).not.toBe(first);
    expect(revise(least, mesh, change("pes-pvc-5"))).toBe(first);
  });

  it("writes canonical JSON with sorted keys at every level", () => {
    expect(writeCanonicalJson({ b: [{ d: 1, c: 2 }], a: null })).toBe('{"a":null,"b":[{"c":2,"d":1}]}');
  });
});
