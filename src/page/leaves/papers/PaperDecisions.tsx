// What can be decided about the papers: title block, sheet, units.
import { setHead } from "../../actions/papers/setHead.ts";
import { setPapers } from "../../actions/papers/setPapers.ts";
import { ChoiceField, TextField } from "../../parts/Fields.tsx";
import { act } from "../../store/bookStore.ts";
import { useBook } from "../../store/useBook.ts";

/** The decisions of the leaf. */
export function PaperDecisions() {
  const given = useBook((b) => b.project?.job);
  if (given === undefined) return null;
  const papers = given.papers ?? {};
  const line = (key: "date" | "drawnBy" | "checkedBy" | "supersedes", label: string) => (
    <TextField
      label={label}
      path={`papers.${key}`}
      given={papers[key] !== undefined}
      value={papers[key] ?? ""}
      none="left open"
      open
      onChange={(value) => act(setPapers, { key, value }, label.toLowerCase())}
    />
  );
  return (
    <>
      <TextField
        label="Title"
        path="title"
        given
        value={given.title}
        onChange={(value) => value !== undefined && act(setHead, { key: "title", value }, "title")}
      />
      <TextField
        label="Issue"
        path="issue"
        given={given.issue !== undefined}
        value={given.issue ?? "A"}
        onChange={(value) => act(setHead, { key: "issue", value }, "issue letter")}
      />
      {line("supersedes", "Takes the place of issue")}
      {line("date", "Date")}
      {line("drawnBy", "Drawn by")}
      {line("checkedBy", "Checked by")}
      <ChoiceField
        label="Sheet"
        path="papers.sheet"
        given={papers.sheet !== undefined}
        value={papers.sheet ?? "A4"}
        choices={["A4", "A3", "Letter", "Tabloid"].map((v) => ({ value: v, words: v }))}
        onChange={(value) => act(setPapers, { key: "sheet", value }, "sheet")}
      />
      <ChoiceField
        label="Units on paper"
        path="papers.units"
        given={papers.units !== undefined}
        value={papers.units ?? "metric"}
        choices={[
          { value: "metric", words: "metric" },
          { value: "imperial", words: "imperial" },
        ]}
        onChange={(value) => act(setPapers, { key: "units", value }, "units on paper")}
      />
    </>
  );
}
