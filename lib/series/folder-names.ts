/** Names of a folder or archive as it was dropped: where series.json lies, and what lies beside it. */
import { AppError } from "../errors/app-error";
import { relativeFileSchema } from "./series-schema";

/** What systems and archivers leave behind. */
const JUNK = /(^|\/)(__MACOSX(\/|$)|\.[^./]|Thumbs\.db$|desktop\.ini$)/;
const SERIES = "series.json";

/**
 * @param paths as they came, with "/" between steps.
 * @returns path by name inside the folder of series.json; files elsewhere are left out.
 * @throws AppError "series.file-missing" without series.json, or with several; "series.file-name"
 *   for a name that leads out of the folder or stands there twice
 */
export function toFolderNames(paths: readonly string[]): Map<string, string> {
  const own = paths.filter((path) => !JUNK.test(path.replace(/^\.\//, "")));
  const found = own.filter((path) => path === SERIES || path.endsWith(`/${SERIES}`));
  const depth = Math.min(...found.map((path) => path.split("/").length));
  const [first, ...more] = found.filter((path) => path.split("/").length === depth);
  if (first === undefined || more.length > 0) {
    throw new AppError(
      "series.file-missing",
      first === undefined
        ? "There is no series.json in it. The folder of a series holds series.json and the recordings that it names."
        : `There is more than one series.json in it: ${[first, ...more].join(", ")}. Give one folder at a time.`,
      { file: SERIES },
    );
  }
  const root = first.slice(0, first.length - SERIES.length);
  const names = new Map<string, string>();
  for (const path of own) {
    if (!path.startsWith(root)) continue;
    const name = path.slice(root.length);
    if (!relativeFileSchema.safeParse(name).success || names.has(name)) {
      throw new AppError(
        "series.file-name",
        `${path} ${names.has(name) ? "is there twice" : "leads out of its folder"}. Nothing was taken.`,
        { file: path },
      );
    }
    names.set(name, path);
  }
  return names;
}
