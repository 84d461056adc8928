// Every code of an error or finding that the source can say, read from its syntax: first argument of PlanError, property `code`,
// and the argument `code` of the small makers (a function with a parameter of that name and type). Does not run anything.
import { readdirSync, readFileSync } from "node:fs";
import { join } from "node:path";
import ts from "typescript";

const root = join(import.meta.dirname, "../src");
const KEBAB = /^[a-z]+(-[a-z0-9]+)*$/;

/** String literals an expression can be: itself, the branches of a choice, or what the constants of its name in the file were set to. */
function readLiterals(node: ts.Node, file: ts.SourceFile): string[] {
  if (ts.isStringLiteral(node)) return [node.text];
  if (ts.isConditionalExpression(node))
    return [...readLiterals(node.whenTrue, file), ...readLiterals(node.whenFalse, file)];
  if (ts.isAsExpression(node)) return readLiterals(node.expression, file);
  if (!ts.isIdentifier(node)) return [];
  const out: string[] = [];
  walk(file, (n) => {
    if (!ts.isVariableDeclaration(n) || n.initializer === undefined) return;
    if (ts.isIdentifier(n.name) && n.name.text === node.text && !ts.isIdentifier(n.initializer))
      out.push(...readLiterals(n.initializer, file));
  });
  return out;
}

function walk(node: ts.Node, see: (node: ts.Node) => void): void {
  see(node);
  ts.forEachChild(node, (child) => walk(child, see));
}

/** Functions of a file that take a code, by name: which parameter it is. */
function findMakers(file: ts.SourceFile): Map<string, number> {
  const makers = new Map<string, number>();
  walk(file, (n) => {
    if (!ts.isFunctionDeclaration(n) && !ts.isArrowFunction(n)) return;
    const at = n.parameters.findIndex((p) => p.name.getText() === "code" && p.type?.getText() !== "number");
    const name = n.name ?? (ts.isVariableDeclaration(n.parent) ? n.parent.name : undefined);
    if (at >= 0 && name) makers.set(name.getText(), at);
  });
  return makers;
}

/** Codes in the order of their files, each with the files it stands in. */
export function scanCodes(): { codes: Map<string, Set<string>>; files: number } {
  const names = readdirSync(root, { recursive: true, encoding: "utf8" })
    .filter((name) => /\.tsx?$/.test(name))
    .sort();
  const files = names.map((name) => {
    const text = readFileSync(join(root, name), "utf8");
    return { name, file: ts.createSourceFile(name, text, ts.ScriptTarget.Latest, true) };
  });
  const codes = new Map<string, Set<string>>();
  // A maker that is exported is called from other files too; a name that two files give to different makers is looked up at home first.
  const everywhere = new Map<string, number>();
  for (const { file } of files)
    for (const [name, at] of findMakers(file))
      if (new RegExp(`export (function|const) ${name}\\b`).test(file.text)) everywhere.set(name, at);
  for (const { name, file } of files) {
    const makers = new Map([...everywhere, ...findMakers(file)]);
    const add = (node: ts.Node | undefined) => {
      for (const code of node ? readLiterals(node, file) : []) {
        if (KEBAB.test(code)) codes.set(code, (codes.get(code) ?? new Set()).add(name));
      }
    };
    walk(file, (n) => {
      if (ts.isNewExpression(n) && n.expression.getText() === "PlanError") add(n.arguments?.[0]);
      if (ts.isPropertyAssignment(n) && n.name.getText() === "code") add(n.initializer);
      if (ts.isCallExpression(n)) add(n.arguments[makers.get(n.expression.getText()) ?? -1]);
      // The words for errors of the file system: code and text by the system's own name.
      if (ts.isPropertyAssignment(n) && ts.isArrayLiteralExpression(n.initializer) && name === "cli/fileErrors.ts")
        add(n.initializer.elements[0]);
      // One code for each kind of catalogue: job-KIND-unknown.
      if (ts.isCallExpression(n) && n.expression.getText() === "unknownEntry")
        for (const kind of readLiterals(n.arguments[0], file)) {
          const code = `job-${kind}-unknown`;
          codes.set(code, (codes.get(code) ?? new Set()).add(name));
        }
    });
  }
  return { codes, files: files.length };
}
