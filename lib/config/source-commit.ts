/** Which source this program was built from: noted by the build, kept with every analysis. */
import { join } from "node:path";
import { z } from "zod";
import { readText } from "./secrets";

const sourceSchema = z.object({
  /** Full hash; null where the source was no checkout. */
  commit: z
    .string()
    .regex(/^[0-9a-f]{40,64}$/)
    .nullable(),
  /** Whether files differed from the commit. */
  changed: z.boolean(),
});
export type Source = z.infer<typeof sourceSchema>;

export const sourcePath = (cloneDir: string): string => join(cloneDir, "build", "source.json");

/** @returns "4f0c…", with "+changes" where the checkout held more than the commit; null where not known. */
export function readSourceCommit(cloneDir: string): string | null {
  const text = readText(sourcePath(cloneDir));
  return text === null ? null : toSourceCommit(text);
}

/** @param text of build/source.json. */
export function toSourceCommit(text: string): string | null {
  const parsed = sourceSchema.safeParse(parseJson(text));
  if (!parsed.success || parsed.data.commit === null) return null;
  return parsed.data.changed ? `${parsed.data.commit}+changes` : parsed.data.commit;
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return undefined;
  }
}
