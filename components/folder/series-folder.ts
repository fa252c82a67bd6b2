/** A folder as it was dropped: names, sizes, and a way to each file. */
import { AppError } from "@/lib/errors/app-error";

export interface SeriesFolder {
  /** Bytes by name inside the folder. */
  sizes: ReadonlyMap<string, number>;
  /** @throws AppError where it cannot be read */
  open: (name: string) => Promise<Blob>;
}

export const missing = (name: string): AppError =>
  new AppError("series.file-missing", `${name} is not in the folder.`, { file: name });
