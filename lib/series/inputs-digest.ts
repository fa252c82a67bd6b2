import { createHash } from "node:crypto";
import type { SeriesFiles } from "./to-series-json";

/**
 * What an analysis is known by: series.json and the bytes behind its names. Who uploaded them, and
 * as which take, makes no difference to the numbers.
 */
export function digestInputs({ series, files }: SeriesFiles): string {
  const inputs = { series, files: files.map(({ file, digest }) => ({ file, digest })) };
  return createHash("sha256").update(JSON.stringify(inputs)).digest("hex");
}
