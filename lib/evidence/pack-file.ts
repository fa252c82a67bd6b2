/** A file of a folder that leaves the lab: a text of ours, or a stored recording. */
export type PackFile =
  | { name: string; text: string }
  | { name: string; digest: string; bytes: number };
