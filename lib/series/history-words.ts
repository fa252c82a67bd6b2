/** An event of the trail in words, as the history of a series shows it. */
import { z } from "zod";
import { formatFrequency } from "../charts/format";

const detailsSchema = z.object({
  file: z.string().optional(),
  label: z.string().nullish(),
  reason: z.string().optional(),
  version: z.number().optional(),
  channel: z.number().optional(),
  state: z.string().optional(),
  message: z.string().optional(),
  recordings: z.number().optional(),
  kept: z.number().optional(),
  loudspeaker: z.string().optional(),
  revision: z.number().optional(),
  name: z.string().optional(),
  for_whom: z.string().optional(),
  changed: z.array(z.string()).optional(),
  decisions: z
    .array(
      z.object({
        nominal_Hz: z.number(),
        cause: z.string().nullable(),
        computed_cause: z.string(),
        reason: z.string().nullable(),
      }),
    )
    .optional(),
  bands: z.number().optional(),
  from_version: z.number().optional(),
  nominal_Hz: z.number().nullish(),
  words: z.string().optional(),
  criterion: z.string().optional(),
  one_person: z.boolean().optional(),
});
type Details = z.infer<typeof detailsSchema>;

const forPlace = ({ label }: Details): string => (label == null ? "" : ` for ${label}`);
const named = ({ file }: Details): string => file ?? "a recording";

/** What each act says; a reason is shown apart. */
const WORDS: Record<string, (details: Details) => string> = {
  "series.created": (d) => `started the series${d.loudspeaker ? ` of ${d.loudspeaker}` : ""}`,
  "series.archived": () => "archived the series",
  "series.restored": () => "took the series back from the archive",
  "recordings.removed": (d) =>
    `removed ${d.recordings === 1 ? "one recording" : `${d.recordings ?? "the"} recordings`} for good${(d.kept ?? 0) === 0 ? "" : `; ${d.kept} are cited or shared and stay`}`,
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
  "decision.taken": (d) => sayDecisions(d),
  "decision.overtaken": (d) => `${sayDecisions(d)}, but somebody else was quicker: not taken`,
  "decision.kept": (d) =>
    `took over the decisions of ${d.bands ?? "some"} bands from version ${d.from_version ?? "?"}`,
  "comment.written": (d) =>
    `commented on ${d.nominal_Hz == null ? "the series" : formatFrequency(d.nominal_Hz)}: “${d.words ?? ""}”`,
  "run-request.made": (d) => `asked for a run: ${d.label ?? "another level"}`,
  "run-request.withdrawn": (d) => `withdrew the run asked for: ${d.label ?? "another level"}`,
  "series.signed-off": (d) =>
    `signed off version ${d.version ?? "?"} for ${d.criterion ?? "a criterion"}${d.one_person === true ? "; one person recorded and signed" : ""}`,
  "series.reopened": (d) => `took back the sign-off of version ${d.version ?? "?"}`,
  "publication.published": (d) => `published revision ${d.revision ?? "?"}`,
  "publication.corrected": (d) => `published revision ${d.revision ?? "?"}, a correction`,
  "publication.withdrawn": (d) => `withdrew revision ${d.revision ?? "?"}`,
  "preview.created": (d) => `made a private preview link for ${d.for_whom ?? "the maker"}`,
  "preview.revoked": (d) => `revoked the preview link for ${d.for_whom ?? "the maker"}`,
  "maker.commented": (d) => `${d.name ?? "the maker"} commented on the preview`,
  "maker.answered": (d) => `answered the comment of ${d.name ?? "the maker"}`,
};

/** One band in full; of many, how many. A reason that all share is shown apart. */
function sayDecisions({ decisions = [] }: Details): string {
  const [first, ...more] = decisions;
  if (first === undefined) return "decided no band";
  const hz = formatFrequency(first.nominal_Hz);
  if (more.length === 0) {
    if (first.cause === null) return `opened ${hz} again`;
    return first.cause === first.computed_cause
      ? `confirmed ${first.cause} at ${hz}`
      : `changed ${hz} from ${first.computed_cause} to ${first.cause}`;
  }
  const last = formatFrequency(decisions.at(-1)?.nominal_Hz ?? first.nominal_Hz);
  const verb = decisions.every((one) => one.cause === null)
    ? "opened"
    : decisions.every((one) => one.cause === one.computed_cause)
      ? "confirmed"
      : "decided";
  return `${verb} ${decisions.length} bands, ${hz} to ${last}`;
}

function findReason({ reason, decisions = [] }: Details): string | null {
  if (reason !== undefined) return reason;
  const reasons = [...new Set(decisions.flatMap((one) => one.reason ?? []))];
  return reasons.length === 0 ? null : reasons.join("; ");
}

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
    reason: findReason(known),
  };
}
