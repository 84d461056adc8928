// Ids as file names that every table's computer takes: plain letters, no path, no reserved word, no two alike.

const LONGEST = 60;
// Device names that one widespread file system refuses whatever ending follows (its published naming rules; from memory).
const RESERVED = /^(con|prn|aux|nul|com[0-9]|lpt[0-9])(\..*)?$/i;

function fileName(id: string): string {
  const plain = id
    .normalize("NFKD")
    .replace(/\p{M}/gu, "")
    .replace(/[^A-Za-z0-9._-]+/g, "_")
    .replace(/^[._-]+|[._-]+$/g, "")
    .slice(0, LONGEST)
    .replace(/[._-]+$/, "");
  if (plain === "") return "unnamed";
  return RESERVED.test(plain) ? `${plain}_`.replace(".", "_") : plain;
}

/**
 * A file name for each id, without its ending: letters, digits, dot, underscore and hyphen, at most 60 characters and a
 * counter, unique also where upper and lower case are one. Ids that are plain already keep their name.
 */
export function fileNames(ids: readonly string[]): string[] {
  const wanted = ids.map(fileName);
  const taken = new Set<string>();
  // First those whose id is plain and free: a name that needed no change is never given away to one that did.
  const kept = wanted.map((name, i) => {
    const own = name === ids[i] && !taken.has(name.toLowerCase());
    if (own) taken.add(name.toLowerCase());
    return own;
  });
  return wanted.map((name, i) => {
    if (kept[i]) return name;
    let free = name;
    for (let n = 2; taken.has(free.toLowerCase()); n++) free = `${name}-${n}`;
    taken.add(free.toLowerCase());
    return free;
  });
}
