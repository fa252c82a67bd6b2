/** An event of the trail in words, as the history of a series shows it. */
import { z } from "zod";

const detailsSchema = z.object({
  file: z.string().optional(),
  label: z.string().nullish(),
  reason: z.string().optional(),
  version: z.number().optional(),
  channel: z.number().optional(),
  state: z.string().optional(),
  message: z.string().optional(),
  recordings: z.number().optional(),
  loudspeaker: z.string().optional(),
  changed: z.array(z.string()).optional(),
});
type Details = z.infer<typeof detailsSchema>;

const forPlace = ({ label }: Details): string => (label == null ? "" : ` for ${label}`);
const named = ({ file }: Details): string => file ?? "a recording";

/** What each act says; a reason is shown apart. */
const WORDS: Record<string, (details: Details) => string> = {
  "series.created": (d) => `started the series${d.loudspeaker ? ` of ${d.loudspeaker}` : ""}`,
  "series.archived": () => "archived the series",
  "series.restored": () => "took the series back from the archive",
  "plan.changed": () => "changed the plan",
  "criteria.changed": () => "changed the criteria of the next analysis",
  "run.uploaded": (d) => `uploaded ${named(d)}${forPlace(d)}`,
  "run.placed": (d) => `${named(d)} moved into its place${forPlace(d)}`,
  "run.checked": (d) => `${named(d)}${forPlace(d)} ${CHECKED[d.state ?? ""] ?? "was checked"}`,
  "run.assigned": (d) => `assigned ${named(d)}${d.label == null ? "" : ` to ${d.label}`}`,
  "run.channel-chosen": (d) => `chose channel ${d.channel ?? "?"} of ${named(d)}`,
  "run.kept": (d) => `kept ${named(d)}${forPlace(d)} in spite of its checks`,
  "run.keep-withdrawn": (d) => `withdrew the reason to keep ${named(d)}`,
  "run.excluded": (d) => `excluded ${named(d)}${forPlace(d)}`,
  "run.brought-back": (d) => `brought ${named(d)} back${forPlace(d)}`,
  "run.check-repeated": (d) => `had ${named(d)} checked again`,
  "run.removed": (d) => `removed ${named(d)}, which fitted no planned run`,
  "slot.excused": (d) => `excused ${d.label ?? "a planned run"}`,
  "slot.excuse-withdrawn": (d) => `withdrew the excuse for ${d.label ?? "a planned run"}`,
  "analysis.requested": (d) => `started an analysis of ${d.recordings ?? "the"} recordings`,
  "analysis.done": (d) => `analysis version ${d.version ?? "?"} is done`,
  "analysis.failed": (d) => `analysis version ${d.version ?? "?"} failed: ${d.message ?? ""}`,
  "analysis.cancelled": () => "an analysis was cancelled: newer recordings replace it",
};

const CHECKED: Record<string, string> = {
  passed: "passed its checks",
  warned: "passed its checks with a warning",
  failed: "failed its checks",
};

/** @returns words, and the reason where the act had one. An act without words is named by itself. */
export function toHistoryWords(
  act: string,
  details: Record<string, unknown>,
): { words: string; reason: string | null } {
  const parsed = detailsSchema.safeParse(details);
  const known = parsed.success ? parsed.data : {};
  return {
    words: WORDS[act]?.(known) ?? act.replaceAll(/[.-]/g, " "),
    reason: known.reason ?? null,
  };
}
