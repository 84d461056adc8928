// At build time: one file with the licences of every package whose code or faces are really in the built page. What is in it is asked of
// the bundles themselves, the workers' too. A package without a text, or under a licence not on the list, stops the build.
import { existsSync, readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import type { Plugin } from "vite";

/** Where the notices stand in the built page. */
export const NOTICES = "third-party.txt";

/** Licences (SPDX) under which a package may go along: none asks for more than that its notice goes along too. */
const ALLOWED = new Set([
  "0BSD",
  "Apache-2.0",
  "Bitstream-Vera",
  "BSD-2-Clause",
  "BSD-3-Clause",
  "BSL-1.0",
  "ISC",
  "MIT",
  "Zlib",
]);

interface Amendment {
  /** SPDX, where package.json has none, or not all of it. */
  licence?: string;
  /** The package whose file has the words of the same licence, where this one comes without. */
  words?: string;
  /** A file of the package that holds more of it. */
  more?: string;
}

/** What packages do not say where it is looked for; each is said in their own sources. */
const AMENDED: Record<string, Amendment> = {
  "@pdf-lib/fontkit": { licence: "MIT AND Apache-2.0", words: "fflate" },
  "bezier-js": { words: "fflate" },
  "clipper2-js": { licence: "BSL-1.0", words: "clipper2-ts" },
  "dejavu-fonts-ttf": { licence: "Bitstream-Vera" },
  makerjs: { words: "pdfjs-dist" },
  pako: { more: "lib/zlib/README" },
};

function readText(path: string): string {
  return readFileSync(path, "utf8").replaceAll("\r\n", "\n").trim();
}

/** The text of a package's licence. */
function readLicence(folder: string): string | undefined {
  const name = readdirSync(folder).find((n) => /^(licen[sc]e|copying)/i.test(n));
  return name === undefined ? undefined : readText(join(folder, name));
}

/** Comments of a source that name a holder or a licence, without their marks. */
function findHolders(path: string): string[] {
  if (!/\.[cm]?js$/.test(path) || !existsSync(path)) return [];
  const comments = readText(path).match(/\/\*[\s\S]*?\*\/|(?:^[ \t]*\/\/.*\n?)+/gm) ?? [];
  return comments
    .filter((c) => /[Cc]opyright\s*[:(©\dA-Z]/.test(c) || /\blicen[sc]ed\b/i.test(c))
    .map((c) => {
      const lines = c.split("\n").map((line) => line.replace(/^[\s/*]+|[\s/*]+$/g, ""));
      return lines.filter((line) => /\w/.test(line.replaceAll("_", ""))).join("\n");
    });
}

/** People as package.json names them. */
function listPeople({ author, contributors = [] }: { author?: unknown; contributors?: unknown[] }): string | undefined {
  const people = [author, ...contributors].filter((p) => typeof p === "string");
  return people.length > 0 ? `By ${people.join(", ")}` : undefined;
}

/** The notice of one package: what it is under, and the texts that must go along. */
function readNotice(folder: string, modules: Set<string>): { name: string; title: string; text: string } {
  const pack = JSON.parse(readFileSync(join(folder, "package.json"), "utf8"));
  const name: string = pack.name;
  const { licence = pack.license, words, more } = AMENDED[name] ?? {};
  const refuse = (why: string) => new Error(`${name} is in the page, but ${why}: see src/page/notices.ts`);
  const ids = String(licence).match(/[\w.-]+/g) ?? [];
  if (!ids.every((id) => id === "AND" || ALLOWED.has(id)))
    throw refuse(`its licence "${licence}" is not on the list of those that may go along`);
  const own = readLicence(folder);
  // packages lie side by side: the folder of another is found from the end of this one's path; its holder stays there
  const other = words === undefined ? undefined : readLicence(join(folder.slice(0, -name.length), words));
  const text = own ?? other?.replace(/^MIT License\s+Copyright .*/, "MIT License");
  if (text === undefined) throw refuse("it comes without the text of its licence");
  const parts = [
    own === undefined ? listPeople(pack) : undefined,
    text,
    more && readText(join(folder, more)),
    existsSync(join(folder, "NOTICE")) ? readText(join(folder, "NOTICE")) : undefined,
    ...new Set([...modules].flatMap(findHolders)),
  ];
  const title = `${name} ${pack.version} (${licence})`;
  return { name, title, text: parts.filter((p) => p !== undefined).join("\n\n") };
}

const HEAD =
  "Seamstay's page is built with these packages. Each is under the licence that follows its name, parts of it as its notices say.";

/** Two plugins: one for the workers' bundles, which are made first, one for the page's own, which writes the file. */
export function gatherNotices(): { page: Plugin; worker: () => Plugin } {
  /** Modules in the bundles by the folder of their package. */
  const held = new Map<string, Set<string>>();
  const gather: Plugin["generateBundle"] = (_options, bundle) => {
    const chunks = Object.values(bundle).filter((file) => file.type === "chunk");
    for (const id of chunks.flatMap((chunk) => chunk.moduleIds)) {
      const path = id.replaceAll("\\", "/").replace(/^\0|\?.*$/g, "");
      const folder = /^.*\/node_modules\/(?:@[^/]+\/)?[^/]+/.exec(path)?.[0];
      if (folder !== undefined) held.set(folder, (held.get(folder) ?? new Set()).add(path));
    }
  };
  const write = () => {
    const notices = [...held].map(([folder, modules]) => readNotice(folder, modules));
    notices.sort((a, b) => (a.name < b.name ? -1 : 1));
    const parts = [HEAD, ...notices.map(({ title, text }) => `${title}\n\n${text}`)];
    return `${parts.join(`\n\n${"=".repeat(100)}\n\n`)}\n`;
  };
  return {
    worker: () => ({ name: "seamstay-notices-worker", generateBundle: gather }),
    page: {
      name: "seamstay-notices",
      apply: "build",
      generateBundle(options, bundle, isWrite) {
        gather.call(this, options, bundle, isWrite);
        this.emitFile({ type: "asset", fileName: NOTICES, source: write() });
      },
    },
  };
}
