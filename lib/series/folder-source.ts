/** A series whose recordings lie in a folder. */
import { existsSync, realpathSync, readFileSync, statSync } from "node:fs";
import { join, sep } from "node:path";
import type { SeriesSource } from "../analysis/measure-series";
import { withFileSource } from "../audio/byte-source";
import { readRecording } from "../audio/read-recording";
import { readTable } from "../audio/read-table";
import { AppError } from "../errors/app-error";

/** @throws AppError "series.file-missing", "series.file-name" where a link leads out of the folder; FileError from the readers. */
export function createFolderSource(folder: string): SeriesSource {
  return {
    readRecording: async (file, channel, loopbackChannel) => {
      const path = locate(folder, file);
      const { recording } = await withFileSource(path, (source) =>
        readRecording(source, { file, channel, loopbackChannel }),
      );
      return recording;
    },
    readTable: (file, columns) =>
      Promise.resolve(readTable(readFileSync(locate(folder, file)), file, columns)),
  };
}

/** Text of series.json. */
export function readSeriesText(folder: string): string {
  return readFileSync(locate(folder, "series.json"), "utf8");
}

function locate(folder: string, file: string): string {
  const path = join(folder, file);
  if (!existsSync(path) || !statSync(path).isFile()) {
    throw new AppError("series.file-missing", `${file} is not in the folder ${folder}.`, { file });
  }
  const root = realpathSync(folder);
  if (!realpathSync(path).startsWith(root.endsWith(sep) ? root : root + sep)) {
    throw new AppError("series.file-name", `${file} leads out of the folder.`, { file });
  }
  return path;
}
