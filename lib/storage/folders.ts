/** The folders below the data folder; both on one file system, since a put is a link. */
import { join } from "node:path";

export const storeFolder = (dataDir: string): string => join(dataDir, "recordings");
export const stagingFolder = (dataDir: string): string => join(dataDir, "staging");
