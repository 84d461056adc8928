import { describe, expect, it } from "vitest";
import { buildHead } from "../../src/core/plan/buildFacts.ts";
import { makeJob } from "../seams/madeForms.ts";

describe("buildHead", () => {
  it("hands on what the engineer of the site has set, and no empty record of it", () => {
    const job = makeJob();
    const site = { windGust: 9, overnight: "corners tied down" };
    const given = buildHead({ ...job, papers: { ...job.papers, site } }, "00000000").job;
    expect(given.site).toEqual(site);
    expect(given).toMatchObject({ title: "test", issue: "A", revision: "00000000", sheet: "A4", units: "metric" });
    expect(buildHead(job, "00000000").job).not.toHaveProperty("site");
  });
});
