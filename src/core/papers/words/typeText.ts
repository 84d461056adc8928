// What a cable or turnbuckle is called on papers. One that the job describes by its own numbers has no name of its own.

/** The catalogue's name, or where the numbers come from. */
export function typeText(id: string): string {
  return id === "job" ? "as in the job" : id;
}
