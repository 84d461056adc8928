// A plan on its way from its worker to the page: each time only what has come to stand in it since, in slices, put in all at once. What
// was there before stays the very same record, so nothing drawn of it is drawn again.
import {
  measureBuilt,
  measureFormFields,
  measurePatterned,
  type SurfaceFields,
} from "../../core/plan/measureFields.ts";
import type { Finding } from "../../core/problem.ts";
import type { Facts } from "../../core/records/facts.ts";
import type { Job } from "../../core/records/job.ts";
import { type Carved, carve, joinInPlace, type Slice } from "./inParts.ts";
import { type Shape, shapeBuilt, shapeForm, shapePanels } from "./shapes.ts";

/** What views draw a plan's surfaces from. */
export interface SentFields extends SurfaceFields {
  formShape: Shape;
  panelsShape?: Shape;
  builtShape?: Shape;
}

/** Facts of a plan and what is drawn of them. */
export interface Grown {
  facts: Facts;
  fields: SentFields | null;
}

/** What has come: facts without their large arrays, and fields. */
export interface Added {
  bones: Partial<Facts>;
  fields: Partial<SentFields>;
}

/**
 * Gives the facts of one plan away as they grow.
 * @param warp direction the prestress is measured along, as the job gives it
 * @param before findings from before the plan, put first
 */
export function createGiver(warp: Job["warp"], before: readonly Finding[]) {
  const given = new Map<string, { value: unknown; items: number | null }>();
  return (facts: Facts): { added: Added; slices: Slice[] } => {
    const fresh: Record<string, unknown> = {};
    for (const [key, value] of Object.entries(facts)) {
      const items = Array.isArray(value) ? value.length : null;
      const known = given.get(key);
      if (value === undefined || (known !== undefined && known.value === value && known.items === items)) continue;
      given.set(key, { value, items });
      fresh[key] = key === "findings" ? [...before, ...facts.findings] : value;
    }
    const { bones, slices } = carve(fresh as Partial<Facts>);
    return { added: { bones, fields: drawFresh(facts, fresh, warp) }, slices };
  };
}

/** Fields of what is new. */
function drawFresh(facts: Facts, fresh: Partial<Facts>, warp: Job["warp"]): Partial<SentFields> {
  const { form, panels } = fresh;
  const built = fresh.rig ?? fresh.assembled;
  return {
    ...(form && { ...measureFormFields(form, warp), formShape: shapeForm(form) }),
    ...(panels && { patterned: measurePatterned(facts, panels), panelsShape: shapePanels(panels) }),
    ...(built && { built: measureBuilt(facts, built), builtShape: shapeBuilt(built) }),
  };
}

/** Takes the facts of one plan in. */
export function createTaker() {
  let slices: Slice[] = [];
  let grown: Grown | null = null;
  return {
    take: (slice: Slice): void => {
      slices.push(slice);
    },
    /** What stands now. The form is the first to come: without it there are no fields. */
    join: ({ bones, fields }: Added): Grown => {
      const added = joinInPlace({ bones, slices } satisfies Carved<Partial<Facts>>);
      slices = [];
      const before = grown?.fields ?? null;
      grown = {
        facts: { ...grown?.facts, ...added } as Facts,
        fields: Object.keys(fields).length === 0 ? before : ({ ...before, ...fields } as SentFields),
      };
      return grown;
    },
  };
}
