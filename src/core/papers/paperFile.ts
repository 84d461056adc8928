// A file of papers, as writers hand it on. Type only.

/** Its place and its bytes. */
export interface PaperFile {
  /** Relative to the folder of the plan, with forward slashes. */
  path: string;
  bytes: Uint8Array;
}
