// Rig: how is it pulled up?
import { useEffect, useRef } from "react";
import { ForceChart } from "../../flat/ForceChart.tsx";
import { RigPlan } from "../../flat/RigPlan.tsx";
import { listSteps, type RigStep } from "../../flat/rigSteps.ts";
import { SensitivityBars } from "../../flat/SensitivityBars.tsx";
import { listBuiltRows } from "../../parts/builtRows.ts";
import { CautionList } from "../../parts/CautionList.tsx";
import { FieldPicker } from "../../parts/FieldPicker.tsx";
import { FigureTable } from "../../parts/FigureTable.tsx";
import { figure } from "../../parts/figure.ts";
import { Waiting } from "../../parts/Waiting.tsx";
import { LazySolid } from "../../solid/LazySolid.tsx";
import { bookStore } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";
import { LeafFrame } from "../LeafFrame.tsx";
import { RigDecisions } from "./RigDecisions.tsx";

function Strip({ steps, at }: { steps: readonly RigStep[]; at: number }) {
  const list = useRef<HTMLOListElement>(null);
  useEffect(() => {
    const one = list.current?.children[at - 1];
    if (one instanceof HTMLElement && list.current)
      list.current.scrollTop = one.offsetTop - list.current.offsetTop - 60;
  }, [at]);
  const go = (i: number) => bookStore.setState({ step: Math.min(Math.max(i, 0), steps.length) });
  return (
    <div className="strip">
      <button type="button" onClick={() => go(at - 1)} disabled={at === 0}>
        ◂ Step back
      </button>
      <ol ref={list}>
        {steps.map((s, i) => (
          <li key={s.step} className={s.hold ? "hold" : undefined}>
            <button type="button" aria-current={at === i + 1 ? "step" : undefined} onClick={() => go(i + 1)}>
              <span className="number">{s.step}</span>
              <span className="quiet">{s.hold ? `${s.stage}, hold` : s.stage}</span>
            </button>
          </li>
        ))}
      </ol>
      <button type="button" onClick={() => go(at + 1)} disabled={at === steps.length}>
        Step on ▸
      </button>
    </div>
  );
}

function StepWords({ step }: { step: RigStep | null }) {
  if (step === null) return <p className="step">Before the first step: hung up, not tensioned.</p>;
  return (
    <div className="step" aria-live="polite">
      <p>
        <strong>
          Step {step.step}, stage {step.stage}
        </strong>
        {step.moves.length > 1 && ": made together, read after all of them"}
        {step.hold && ". Hold point: read and compare everything before going on"}
      </p>
      <ul>
        {step.moves.map((m) => (
          <li key={m.adjuster}>
            <strong>{m.adjuster}</strong>: {m.travel >= 0 ? "shorten" : "lengthen"} by {figure(Math.abs(m.travel), 1)}{" "}
            mm ({figure(Math.abs(m.turns), 2)} turns), pin to pin {figure(m.pinFrom, 4)} → {figure(m.pinTo, 4)} m. Then
            it reads {figure(m.expect, 1)} kN, between {figure(m.low, 1)} and {figure(m.high, 1)}.
          </li>
        ))}
      </ul>
      {step.greatest && (
        <p>
          Nearest its limit: {step.greatest.id} with {figure(step.greatest.kN, 1)} kN,{" "}
          {figure(100 * step.greatest.share, 0)} % of it.
        </p>
      )}
    </div>
  );
}

function RigFigures() {
  const facts = useBook((b) => b.facts);
  const { rig, cables, asBuilt, tensioning } = facts ?? {};
  return (
    <FigureTable
      caption="Rig"
      rows={[
        ...(tensioning
          ? [
              {
                what: "Issue of the schedule",
                value: tensioning.issuable ? "may be issued" : "NOT FOR ISSUE",
                ...(tensioning.issuable
                  ? {}
                  : { against: "it stands on defaults: give cables, adjusters, supports and the limit" }),
              },
            ]
          : []),
        ...(asBuilt ? listBuiltRows(asBuilt) : []),
        ...(rig?.adjusters ?? []).slice(0, 16).map((a) => ({
          id: a.id,
          what: `${a.id} target`,
          value: figure(a.target, 1),
          unit: "kN",
          against: a.capacity === null ? "no capacity given" : `capacity ${figure(a.capacity, 0)} kN`,
        })),
        ...(cables ?? []).slice(0, 16).map((c) => ({
          id: c.id,
          what: `Cable ${c.id}, cut to`,
          value: figure(c.cutLength, 3),
          unit: "m",
          against: `${figure(c.force, 1)} kN${c.utilisation === null ? "" : `, ${figure(100 * c.utilisation, 0)} % of its breaking force`}`,
        })),
      ]}
    />
  );
}

/** The leaf. */
export function RigLeaf() {
  const facts = useBook((b) => b.facts);
  const fields = useBook((b) => b.fields);
  const field = useBook((b) => b.field);
  const step = useBook((b) => b.step);
  const { form, rig, tensioning } = facts ?? {};
  const steps = tensioning ? listSteps(tensioning) : [];
  const at = Math.min(step, steps.length);
  const now = at === 0 ? null : (steps[at - 1] ?? null);
  const onForm = field === "builtWarp" || field === "builtWeft";
  const greatest = Math.max(0, ...steps.map((s) => s.greatest?.share ?? 0));
  const plan = form && rig && rig.adjusters.length > 0;
  return (
    <LeafFrame
      leaf="rig"
      station="rig"
      question="How is it pulled up?"
      answer={
        steps.length === 0
          ? facts?.cables
            ? facts.assembled !== undefined
              ? "No adjuster stands on this form: it is held all round and carries no schedule; how it stands once assembled is told beside."
              : "No schedule could be made: what stops it stands under “To look at” and with the findings."
            : "Not worked out yet."
          : `${rig?.adjusters.length ?? 0} adjusters in ${steps.length} steps; on the way no part passes ${figure(100 * greatest, 0)} % of its limit.`
      }
      tools={<FieldPicker fields={["none", "builtWarp", "builtWeft"]} value={onForm ? field : "none"} />}
      stage={
        !facts?.cables || !form ? (
          <Waiting what="Adjusters" />
        ) : onForm || !plan ? (
          <LazySolid
            facts={facts}
            fields={fields}
            field={onForm ? field : "none"}
            words={onForm ? "The roof as built, coloured by stress." : "The roof as built."}
          />
        ) : (
          <div className="rigging">
            <RigPlan form={form} rig={rig} facts={facts} step={now} />
            <Strip steps={steps} at={at} />
            <StepWords step={now} />
            <ForceChart facts={facts} steps={steps} at={at} />
          </div>
        )
      }
      figures={
        facts?.cables && (
          <>
            <CautionList paper="schedule" />
            <RigFigures />
            {facts.sensitivity && facts.sensitivity.length > 0 && <SensitivityBars sensitivity={facts.sensitivity} />}
          </>
        )
      }
      decisions={<RigDecisions />}
    />
  );
}
