// Names that break careless writers, through every kind of file and a reader of it that is not ours: ezdxf and dxf-parser, an XML parser, a CSV
// reader, a zip reader, pdftotext. Each name comes back as typed or as its replacement, written out here by hand; no file is harmed.
import { spawnSync } from "node:child_process";
import { mkdtempSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import DxfParser from "dxf-parser";
import { unzipSync } from "fflate";
import { expect, test } from "vitest";
import { writePapers } from "../../src/core/papers/writePapers.ts";
import { hasEzdxf, PYTHON } from "./cutFiles/readDxf.ts";
import { fonts, missing, saved } from "./made/madePapers.ts";
import { sampleFacts } from "./made/sampleFacts.ts";
import { withRig } from "./made/sampleRig.ts";

/** What was typed, and what stands for it in text files; in DXF and on sheets where that is something else again. */
interface Name {
  typed: string;
  plain: string;
  dxf?: string;
  sheet?: string;
  /** File name without its ending. */
  file?: string;
}

const as = (typed: string, more: Partial<Name> = {}): Name => ({ typed, plain: typed, ...more });
const LONG = `${"long ".repeat(59)}name!`;

const SETS: Record<string, Record<string, Name>> = {
  "formula, markup, path, control, comma, text commands": {
    P1: as('Ø Ł β → " < &', { file: "unnamed" }),
    P2: as("=1+1", { file: "1_1" }),
    P3: as("two\r\nlines\tand\u0000more", { plain: "two lines and more", file: "two_lines_and_more" }),
    S1: as("-S1\u2028second", { plain: "-S1 second" }),
    S2: as('@S2, "with" comma'),
    E1: as("North\u0007edge", { plain: "North edge" }),
    E2: as("%%c^Jedge", { dxf: "% %c^ Jedge" }),
    R1: as("../../roll/one", { file: "roll_one" }),
    R2: as("..\\..\\ROLL\\ONE", { file: "ROLL_ONE-2" }),
    T1: as("<b>T1</b>&amp;"),
  },
  "right to left, 300 letters, none, equal but for case, beyond the face": {
    P1: as("לוח 12", { file: "12" }),
    P2: as(LONG, { file: LONG.replace(/ /g, "_").slice(0, 60).replace(/_$/, "") }),
    P3: as("", { file: "unnamed" }),
    S1: as("seam"),
    S2: as("SEAM"),
    E1: as("قماش \u202egnp.exe", { plain: "قماش gnp.exe" }),
    E2: as("\ud800broken", { plain: "\ufffdbroken" }),
    R1: as("roll", { file: "roll" }),
    R2: as("ROLL", { file: "ROLL-2" }),
    T1: as("張力 1", { sheet: "?? 1" }),
  },
  "device names, emoji, three alike": {
    P1: as("CON", { file: "CON_" }),
    P2: as("con", { file: "con_-2" }),
    P3: as("Con", { file: "Con_-3" }),
    S1: as("+S1"),
    S2: as('=HYPERLINK("http://x")'),
    E1: as("edge 😀", { dxf: "edge ?", sheet: "edge 😀" }),
    R1: as("nul.txt", { file: "nul_txt_" }),
    R2: as("LPT1", { file: "LPT1_" }),
    T1: as("T'1\""),
  },
};

const SCRIPT = [
  "import sys, json, csv, io, zipfile, xml.etree.ElementTree as ET, tempfile, os",
  "z = zipfile.ZipFile(sys.argv[1]); out = {'bad': z.testzip(), 'names': z.namelist(), 'svg': {}, 'csv': {}, 'dxf': {}}",
  "S = '{http://www.w3.org/2000/svg}'",
  "try:\n  import ezdxf\n  from ezdxf.lldxf.encoding import decode_dxf_unicode\nexcept ImportError: ezdxf = None",
  "for n in z.namelist():",
  "  b = z.read(n)",
  "  if n.endswith('.svg'):",
  "    r = ET.fromstring(b); g = [e for e in r.iter(S + 'g') if e.get('id') == 'CUT'][0]",
  "    out['svg'][n] = {'texts': [t.text for t in r.iter(S + 'text')], 'title': r.find(S + 'title').text,",
  "      'cuts': sum(p.get('d').endswith('Z') for p in g.iter(S + 'path'))}",
  "  if n.endswith('.csv'):",
  "    rows = list(csv.reader(io.StringIO(b.decode('utf-8'), newline=''), strict=True))",
  "    assert len({len(r) for r in rows}) == 1, n",
  "    out['csv'][n] = rows",
  "  if n.endswith('.dxf') and ezdxf:",
  "    p = os.path.join(tempfile.mkdtemp(), 'x.dxf'); open(p, 'wb').write(b)",
  "    d = ezdxf.readfile(p); a = d.audit()",
  "    m = d.modelspace()",
  "    out['dxf'][n] = {'faults': len(a.errors) + len(a.fixes), 'texts': [decode_dxf_unicode(e.dxf.text) for e in m.query('TEXT')],",
  "      'cuts': sum(e.is_closed for e in m.query('POLYLINE LWPOLYLINE') if e.dxf.layer == 'CUT')}",
  "print(json.dumps(out))",
].join("\n");

interface Seen {
  bad: string | null;
  names: string[];
  svg: Record<string, { texts: string[]; title: string; cuts: number }>;
  csv: Record<string, string[][]>;
  dxf: Record<string, { faults: number; texts: string[]; cuts: number }>;
}

/** Names of files as a disk without upper and lower case must keep them apart, none of them a device. */
function soundPaths(paths: readonly string[]): void {
  expect(new Set(paths.map((p) => p.toLowerCase())).size).toBe(paths.length);
  for (const path of paths) {
    for (const part of path.split("/")) {
      expect(part, path).toMatch(/^[A-Za-z0-9][A-Za-z0-9._-]{0,79}$/);
      expect(part, path).not.toMatch(/^(con|prn|aux|nul|com\d|lpt\d)(\.|$)/i);
    }
  }
}

const skipped = missing.length > 0 || !hasEzdxf ? " (some readers are not on this machine)" : "";
test.each(Object.keys(SETS))(
  `%s: every reader finds every name or its replacement, and every cut${skipped}`,
  async (title) => {
    const set = SETS[title]!;
    const names = Object.fromEntries(Object.entries(set).map(([id, n]) => [id, n.typed]));
    const facts = withRig(sampleFacts({ names: { ...names, title: set.P1!.typed } }), { names });
    const { files } = await writePapers(facts, {
      fonts,
      papers: ["cut-files", "dxf2000", "lists", "panel-cards", "rig", "bundle"],
    });
    const zip = files.find((f) => f.path === "papers.zip")!.bytes;
    soundPaths(files.map((f) => f.path));

    const archive = join(mkdtempSync(join(tmpdir(), "names-")), "papers.zip");
    writeFileSync(archive, zip);
    const run = spawnSync(PYTHON, ["-c", SCRIPT, archive], { encoding: "utf8", maxBuffer: 1 << 28 });
    expect(run.stderr).toBe("");
    const seen = JSON.parse(run.stdout) as Seen;
    expect(seen.bad).toBeNull();
    expect(seen.names).toEqual(files.map((f) => f.path).filter((p) => p !== "papers.zip"));
    const of = (id: string) => set[id] ?? as(id, { file: id });
    const own = [
      ...["P1", "P2", "P3"].map((id) => ({
        id,
        stem: `panels/${of(id).file}`,
        cuts: 1,
        head: `PANEL ${of(id).plain}`,
      })),
      ...["R1", "R2"].map((id) => ({ id, stem: `rolls/${of(id).file}`, cuts: 2, head: `ROLL ${of(id).plain}` })),
    ];
    const inDxf = (name: Name) => name.dxf ?? name.plain;
    const held = unzipSync(zip);
    for (const { id, stem, cuts, head } of own) {
      const svg = seen.svg[`${stem}.svg`]!;
      expect(svg.cuts, stem).toBe(cuts);
      expect(
        svg.texts.some((t) => t.startsWith(head.trim())),
        `${head} in ${stem}.svg`,
      ).toBe(true);
      const [folder, file] = stem.split("/");
      for (const path of [`${stem}.dxf`, `${folder}/dxf2000/${file}.dxf`]) {
        const parsed = new DxfParser().parseSync(Buffer.from(held[path]!).toString("latin1"))!.entities as unknown as {
          layer: string;
          shape?: boolean;
          text?: string;
        }[];
        const decoded = parsed.flatMap((e) =>
          e.text === undefined
            ? []
            : [e.text.replace(/\\U\+([0-9A-F]{4})/g, (_, c) => String.fromCharCode(Number.parseInt(c, 16)))],
        );
        expect(parsed.filter((e) => e.layer === "CUT" && e.shape).length, path).toBe(cuts);
        const texts = [decoded, ...(hasEzdxf ? [seen.dxf[path]!.texts] : [])];
        for (const found of texts) {
          // A text of R12 ends after 250 characters; the beginning stands.
          expect(
            found.some((t) => head.trim().startsWith(t.slice(0, 60)) || t.startsWith(head.trim())),
            `${head} in ${path}`,
          ).toBe(true);
          if (id === "P1") {
            const [e1, s1] = [inDxf(of("E1")), inDxf(of("S1"))];
            expect(
              found.some((t) => t.includes(e1)),
              `${e1} in ${path}`,
            ).toBe(true);
            expect(
              found.some((t) => t.includes(s1)),
              `${s1} in ${path}`,
            ).toBe(true);
          }
        }
        if (hasEzdxf) expect([seen.dxf[path]!.faults, seen.dxf[path]!.cuts], path).toEqual([0, cuts]);
      }
    }
    // Lists: the cell is the name; a formula is disarmed by an apostrophe before it.
    const cells = new Set(Object.values(seen.csv).flat(2));
    for (const [id, { plain }] of Object.entries(set)) {
      if (id === "E2") continue;
      expect(cells, id).toContain(/^[=+\-@]/.test(plain) ? `'${plain}` : plain);
    }
    for (const cell of cells) expect(/^[=+@]|^-(?![\d.]+$)/.test(cell), cell).toBe(false);
    if (missing.length > 0) return;
    // Its plain text has the letters of each word as typed, between marks of its own.
    const text = (bytes: Uint8Array) =>
      spawnSync("pdftotext", ["-layout", saved(bytes), "-"], { encoding: "utf8" }).stdout;
    const sheets = files
      .filter((f) => f.path.endsWith(".pdf"))
      .map((f) => text(f.bytes).replace(/[\u202a-\u202e]/g, ""));
    for (const [id, name] of Object.entries(set)) {
      if (name.plain.length > 60 || name.plain === "") continue;
      // Word by word: which stands left of which is looked at in pdf/lineOrder.test.ts, a reader of text puts them in an order of its own.
      for (const word of (name.sheet ?? name.plain).split(" "))
        expect(
          sheets.some((sheet) => sheet.includes(word)),
          `${id}: ${word} on the sheets`,
        ).toBe(true);
    }
  },
);
