/** Where recordings lie and where uploads are staged: beside each other, on one file system. */
import { join } from "node:path";
import { getEnvironment } from "../../lib/config/environment";
import { createFileStore } from "../../lib/storage/file-store";
import type { RecordingStore } from "../../lib/storage/recording-store";
import { stagingFolder, storeFolder } from "../../lib/storage/folders";

let store: RecordingStore | undefined;

export function getStore(): RecordingStore {
  store ??= createFileStore(storeFolder(getEnvironment().dataDir));
  return store;
}

export const getStagingFolder = (): string => stagingFolder(getEnvironment().dataDir);

/** Path of a staged upload; ids are ours, of hex digits only. */
export const stagedPath = (uploadId: string): string => join(getStagingFolder(), uploadId);
