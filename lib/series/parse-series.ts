/** series.json from text, refused by name and place where it does not fit. */
import type { z } from "zod";
import { AppError } from "../errors/app-error";
import type { ErrorCode } from "../errors/error-table";
import { seriesSchema, type Series } from "./series-schema";

const FILE = "series.json";
const REMEDY = "See the description of series.json.";

/**
 * @throws AppError "series.not-json", "series.unknown-key", "series.file-name", "calibration.missing" or "series.invalid"
 *   with every fault in details.faults.
 */
export function parseSeries(text: string): Series {
  const parsed = seriesSchema.safeParse(parseJson(text));
  if (parsed.success) return parsed.data;
  const faults = parsed.error.issues.flatMap(toFaults);
  const first = faults[0] ?? { code: "series.invalid" as const, path: "", message: "does not fit" };
  const message = `${FILE}: ${first.path === "" ? "" : `${first.path} `}${first.message}${faults.length > 1 ? ` (and ${faults.length - 1} more)` : ""}. ${REMEDY}`;
  throw new AppError(first.code, message, {
    file: FILE,
    details: { faults: faults.map(({ path, message: what }) => ({ path, message: what })) },
  });
}

function parseJson(text: string): unknown {
  try {
    // Some editors put a byte-order mark first.
    return JSON.parse(text.replace(/^\uFEFF/, ""));
  } catch (error) {
    throw new AppError(
      "series.not-json",
      `${FILE} is not JSON: ${error instanceof Error ? error.message : "it cannot be read"}. Comments are not part of the format.`,
      {
        file: FILE,
        cause: error,
      },
    );
  }
}

interface Fault {
  code: ErrorCode;
  path: string;
  message: string;
}

function toFaults(issue: z.core.$ZodIssue): Fault[] {
  const path = issue.path.reduce<string>(
    (text, step) =>
      typeof step === "number"
        ? `${text}[${step}]`
        : text === ""
          ? String(step)
          : `${text}.${String(step)}`,
    "",
  );
  if (issue.code === "unrecognized_keys") {
    return issue.keys.map((key) => ({
      code: "series.unknown-key",
      path: path === "" ? key : `${path}.${key}`,
      message: "is not a known key",
    }));
  }
  if (issue.code === "invalid_union") {
    // The alternative that comes nearest is the one with the fewest faults.
    const nearest = [...issue.errors].sort((a, b) => a.length - b.length)[0] ?? [];
    return nearest.flatMap((inner) => toFaults({ ...inner, path: [...issue.path, ...inner.path] }));
  }
  const isName = issue.code === "custom" && issue.params?.code === "series.file-name";
  return [
    {
      code: isName ? "series.file-name" : "series.invalid",
      path,
      message: issue.message.replace(/^Invalid input: /, ""),
    },
  ];
}
