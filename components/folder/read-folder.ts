/** A dropped folder, or its archive, as names with a way to each file. */
import { toFolderNames } from "@/lib/series/folder-names";
import { readZip } from "./read-zip";
import { missing, type SeriesFolder } from "./series-folder";

/** @param files of a chosen folder or of a drop; one archive alone is unpacked. */
export async function readFolder(files: readonly DroppedFile[]): Promise<SeriesFolder> {
  const [only, ...more] = files;
  if (only !== undefined && more.length === 0 && /\.zip$/i.test(only.path)) {
    return readZip(only.file);
  }
  const names = toFolderNames(files.map(({ path }) => path));
  const byPath = new Map(files.map(({ path, file }) => [path, file]));
  const found = [...names].flatMap(([name, path]) => {
    const file = byPath.get(path);
    return file === undefined ? [] : [[name, file] as const];
  });
  const byName = new Map(found);
  return {
    sizes: new Map(found.map(([name, file]) => [name, file.size])),
    open: (name) => {
      const file = byName.get(name);
      if (file === undefined) throw missing(name);
      return Promise.resolve(file);
    },
  };
}

export interface DroppedFile {
  /** With its folders, "series/76.wav". */
  path: string;
  file: File;
}

export const toDroppedFiles = (list: FileList | null): DroppedFile[] =>
  Array.from(list ?? []).map((file) => ({
    path: file.webkitRelativePath === "" ? file.name : file.webkitRelativePath,
    file,
  }));

/** What was let go over the page, folders included. Call it in the event itself. */
export async function takeDrop(transfer: DataTransfer): Promise<DroppedFile[]> {
  const entries = Array.from(transfer.items).flatMap((item) => item.webkitGetAsEntry() ?? []);
  const lists = await Promise.all(entries.map(walk));
  return lists.flat();
}

async function walk(entry: FileSystemEntry): Promise<DroppedFile[]> {
  if (isFile(entry)) {
    const file = await new Promise<File>((resolve, reject) => entry.file(resolve, reject));
    return [{ path: entry.fullPath.replace(/^\//, ""), file }];
  }
  if (!isDirectory(entry)) return [];
  const reader = entry.createReader();
  const found: DroppedFile[] = [];
  for (;;) {
    const batch = await new Promise<FileSystemEntry[]>((resolve, reject) =>
      reader.readEntries(resolve, reject),
    );
    if (batch.length === 0) return found;
    for (const inner of batch) found.push(...(await walk(inner)));
  }
}

const isFile = (entry: FileSystemEntry): entry is FileSystemFileEntry => entry.isFile;
const isDirectory = (entry: FileSystemEntry): entry is FileSystemDirectoryEntry =>
  entry.isDirectory;
