// The list of papers, those to print first.

import { saveFile } from "../../keep/saveFiles.ts";
import { PressButton } from "../../parts/PressButton.tsx";
import type { PaperFile } from "../../store/bookStore.ts";

/** What a file is, by its path; the list of papers is parted by the groups and keeps their order. */
const KINDS: { group: string; kinds: [RegExp, string][] }[] = [
  {
    group: "Sheets to print",
    kinds: [
      [/^index\.pdf$/, "what is in the folder, and for whom"],
      [/panel-cards.*\.pdf$/, "a card for each panel: lengths to check, marks, sides"],
      [/roll-sheets.*\.pdf$/, "each roll with what is cut from it"],
      [/(schedule|tension).*\.pdf$/, "moves with the force to read after each"],
      [/cable.*\.pdf$/, "cable lengths and marks, hardware"],
      [/findings.*\.pdf$/, "what was checked, against what, what is open"],
      [/\.pdf$/, "sheets to print"],
    ],
  },
  { group: "Lists", kinds: [[/\.csv$/, "list for a table program"]] },
  {
    group: "Rolls for the table",
    kinds: [
      [/^(rolls|bites)\/.*\.dxf$/, "cut file"],
      [/^(rolls|bites)\/.*\.svg$/, "drawing"],
    ],
  },
  {
    group: "Panels for the table",
    kinds: [
      [/^panels\/.*\.dxf$/, "cut file"],
      [/^panels\/.*\.svg$/, "drawing"],
    ],
  },
  { group: "The plan as data", kinds: [[/./, "all figures of this plan"]] },
];

/** The papers under the heads of the list, each with what it is. */
function sortPapers(files: readonly PaperFile[]): { group: string; papers: { file: PaperFile; words: string }[] }[] {
  const left = new Set(files);
  return KINDS.map(({ group, kinds }) => {
    const papers = kinds.flatMap(([kind, words]) => {
      const these = [...left].filter((f) => kind.test(f.path));
      for (const f of these) left.delete(f);
      return these.map((file) => ({ file, words }));
    });
    return { group, papers };
  }).filter(({ papers }) => papers.length > 0);
}

const sizeOf = (n: number) =>
  n < 1024 ? `${n} B` : n < 1024 * 1024 ? `${(n / 1024).toFixed(0)} kB` : `${(n / 1024 / 1024).toFixed(1)} MB`;

/** The list; `shown`: the one looked at. */
export function PaperList({
  files,
  shown,
  onShow,
}: {
  files: readonly PaperFile[];
  shown: string | null;
  onShow: (path: string) => void;
}) {
  return (
    <table className="things papers">
      <caption>Papers of this plan</caption>
      <thead>
        <tr>
          <th scope="col">Paper</th>
          <th scope="col">Size</th>
          <th scope="col">Save</th>
        </tr>
      </thead>
      {sortPapers(files).map(({ group, papers }) => (
        <tbody key={group}>
          <tr className="group">
            <th scope="rowgroup" colSpan={3}>
              {group}
            </th>
          </tr>
          {papers.map(({ file: f, words }) => (
            <tr key={f.path} className={f.path === shown ? "lit" : undefined}>
              <th scope="row">
                <button type="button" className="place" onClick={() => onShow(f.path)}>
                  {f.path}
                </button>
                <span className="against">{words}</span>
              </th>
              <td>{sizeOf(f.bytes.length)}</td>
              <td>
                <PressButton label={`Save ${f.path}`} onPress={() => saveFile(f)}>
                  Save
                </PressButton>
              </td>
            </tr>
          ))}
        </tbody>
      ))}
    </table>
  );
}
