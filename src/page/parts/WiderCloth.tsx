// What wider cloth would change: from what width of roll one strip fewer would do, or that it is not the cloth that asks for so many.
import { isTurned } from "../../core/plan/clothRoom.ts";
import { type FewerStrips, tellFewerStrips } from "../../core/plan/fewerStrips.ts";
import type { Facts } from "../../core/records/facts.ts";
import { useBook } from "../store/useBook.ts";
import { useRoom } from "../store/useRoom.ts";
import { figure } from "./figure.ts";
import { jumpTo } from "./jump.ts";

const strips = (n: number) => `${n} ${n === 1 ? "strip" : "strips"}`;

function tell(one: FewerStrips, room: number, asked: boolean): string {
  const width = `about ${figure(one.widest / 1000, 2)} m wide with allowances`;
  if (one.limit === null)
    return `Wider rolls alone would not make the ${strips(one.strips)} fewer: ${one.strips - 1}, ${width}, would lie on the ${figure(room, 2)} m there are${asked ? ", but so many are asked for" : "; it is not the width that asks for so many"}.`;
  const head = `${strips(one.strips - 1)} in place of ${one.strips} would be ${width}: from rolls of about ${figure(one.roll / 1000, 2)} m on`;
  return `${head}${one.limit === "asked" ? ", and with the widest strip that is asked for set so wide" : ""}. It may take 3 % more: that, and how much cloth, is known once it is planned.`;
}

/** One or two sentences; nothing where no strip can be spared, or the seams were given one by one. */
export function WiderCloth({ facts }: { facts: Facts }) {
  const job = useBook((b) => b.job);
  const room = useRoom();
  const field = useBook((b) => (b.project?.job.rolls?.length ? "rolls[0].width" : "rolls"));
  if (job === null || room === null) return null;
  const panels = (facts.panels ?? []).map((p) => ({ id: p.id, width: p.size.width, turned: isTurned(p) }));
  const all = tellFewerStrips(job, facts.layouts ?? [], panels);
  const byWidth = all.filter((f) => f.limit !== null).sort((a, b) => a.roll - b.roll);
  const one = byWidth[0] ?? all[0];
  if (one === undefined) return null;
  return (
    <p className="why">
      <strong>Wider cloth{all.length > 1 && `, ${one.region} first`}</strong>:{" "}
      {tell(one, room.cut, job.seams.count !== "auto")}{" "}
      <button type="button" className="place" onClick={() => jumpTo("rolls", field)}>
        Set the rolls’ width
      </button>
    </p>
  );
}
