/**
 * Which planned run a file belongs to, by its name alone. Never guesses: a name that fits two
 * places, or none, is left to the tester. The measured level confirms later and moves nothing.
 */
import { toLevelText, type PlannedRun, type RecordingRole } from "../series/planned-runs";

export type FileMatch =
  | { outcome: "matched"; slot: string }
  | { outcome: "unmatched"; reason: string };

/** Words of a file name, in the languages that recorders and people name files in here. */
const ROLE_WORDS: readonly { role: RecordingRole | "calibrator"; words: readonly string[] }[] = [
  { role: "calibrator", words: ["calibrator", "calibration", "calib", "cal", "pistonphone"] },
  { role: "ambient", words: ["room", "ambient", "ambience", "noise", "background", "silence"] },
  { role: "long-term", words: ["long", "longterm", "conditioned", "hot", "lt"] },
  { role: "closing", words: ["closing", "close", "last", "final"] },
  { role: "variant", words: ["variant"] },
  { role: "short-term", words: ["short", "shortterm", "st"] },
];
const AFTER_WORDS = new Set(["after", "end", "post"]);
const REPEAT_WORD = /^(?:r|rep|repeat)(\d*)$/;

/**
 * @param fileName as it came; folders before it are ignored.
 * @param planned the recordings of the plan, in any order.
 */
export function matchFile(fileName: string, planned: readonly PlannedRun[]): FileMatch {
  const stem = toStem(fileName);
  const exact = planned.filter((run) => toStem(run.fileName) === stem);
  if (exact.length === 1 && exact[0] !== undefined) return matched(exact[0]);

  const words = toWords(withoutLoudspeaker(stem, planned));
  const roles = rolesNamed(words);
  if (roles.length > 1) {
    return unmatched(`${fileName} names more than one kind of run. Assign it by hand.`);
  }
  const role = roles[0];
  if (role === "calibrator") return matchCalibrator(fileName, words, planned);
  const levels = levelsNamed(words, planned);
  const repeat = repeatNamed(words);
  if (role === undefined && levels.length === 0) {
    return unmatched(`${fileName} names no planned level and no kind of run. Assign it by hand.`);
  }
  if (levels.length > 1) {
    const named = levels.map((level) => `${toLevelText(level)} dB`).join(" and ");
    return unmatched(`${fileName} names ${named}. Assign it by hand.`);
  }
  const [level] = levels;
  const fitting = planned.filter(
    (run) =>
      run.role === (role ?? "short-term") &&
      (level === undefined || run.levelDb === level) &&
      // A plain name is the first run of its level: repeats carry their number.
      (run.role !== "short-term" || run.repeat === repeat),
  );
  return only(fileName, fitting);
}

function matchCalibrator(
  fileName: string,
  words: readonly string[],
  planned: readonly PlannedRun[],
): FileMatch {
  const after = words.some((word) => AFTER_WORDS.has(word));
  const wanted = after ? "calibrator-after" : "calibrator-before";
  return only(
    fileName,
    planned.filter((run) => run.role === wanted),
  );
}

function only(fileName: string, fitting: readonly PlannedRun[]): FileMatch {
  if (fitting.length === 1 && fitting[0] !== undefined) return matched(fitting[0]);
  if (fitting.length === 0) {
    return unmatched(`${fileName} fits no run of the plan. Assign it by hand.`);
  }
  const labels = fitting.map((run) => run.label).join(" or ");
  return unmatched(`${fileName} could be ${labels}. Assign it by hand.`);
}

const matched = (run: PlannedRun): FileMatch => ({ outcome: "matched", slot: run.slot });
const unmatched = (reason: string): FileMatch => ({ outcome: "unmatched", reason });

/** Lower case, without folders, extension and what a file manager adds to a copy: " (1)". */
function toStem(fileName: string): string {
  const base = fileName.split(/[/\\]/).at(-1) ?? fileName;
  return base
    .toLowerCase()
    .replace(/\.[a-z0-9]{1,5}$/, "")
    .replace(/\s*(?:\(\d+\)|- copy)$/, "")
    .trim();
}

/** The loudspeaker's own name may hold digits ("osier5a"): it says nothing of the level. */
function withoutLoudspeaker(stem: string, planned: readonly PlannedRun[]): string {
  const name = planned[0]?.fileName.split("_")[0]?.toLowerCase() ?? "";
  return name !== "" && stem.startsWith(`${name}_`) ? stem.slice(name.length + 1) : stem;
}

/** "osier 76dB_short-r2" gives osier, 76, short, r2. A decimal point or comma stays in its number. */
function toWords(stem: string): string[] {
  return stem
    .replaceAll(/(\d),(\d)/g, "$1.$2")
    .replaceAll(/(\d)\s*db(?:spl)?(?![a-z])/g, "$1 ")
    .split(/[\s_\-+()[\]]+|(?<!\d)\.|\.(?!\d)/)
    .filter((word) => word !== "");
}

function rolesNamed(words: readonly string[]): (RecordingRole | "calibrator")[] {
  return ROLE_WORDS.filter((entry) =>
    words.some((word) => entry.words.includes(word.replace(/\d+$/, ""))),
  ).map((entry) => entry.role);
}

function levelsNamed(words: readonly string[], planned: readonly PlannedRun[]): number[] {
  const levels = new Set(planned.flatMap((run) => (run.levelDb === null ? [] : [run.levelDb])));
  return [...levels].filter((level) => words.some((word) => Number(word) === level));
}

function repeatNamed(words: readonly string[]): number {
  for (const word of words) {
    const found = REPEAT_WORD.exec(word);
    if (found !== null) return found[1] === "" ? 2 : Number(found[1]);
  }
  return 1;
}
