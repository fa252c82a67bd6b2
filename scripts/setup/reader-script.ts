/** The one script of the public pages, bundled from its source; kept in public/ as a plain file. */
import { readFileSync, writeFileSync } from "node:fs";
import { join } from "node:path";
import { build, type Plugin } from "esbuild";
import { cloneDir } from "./bootstrap.mjs";

export const readerScriptPath = join(cloneDir, "public", "reader.js");

/** The status of an error over HTTP means nothing in a page: a new code leaves the script as it is. */
const withoutErrorTable: Plugin = {
  name: "without-error-table",
  setup: (one) => {
    one.onLoad({ filter: /lib\/errors\/error-table\.ts$/ }, () => ({
      contents: "export const ERROR_TABLE = {};",
      loader: "ts",
    }));
  },
};

/** @returns the text of public/reader.js as its sources give it. */
export async function bundleReaderScript(): Promise<string> {
  const { outputFiles } = await build({
    absWorkingDir: cloneDir,
    entryPoints: ["components/reader/seat-script.ts"],
    bundle: true,
    minify: true,
    format: "iife",
    target: "es2022",
    legalComments: "none",
    charset: "ascii",
    tsconfig: "tsconfig.json",
    plugins: [withoutErrorTable],
    write: false,
  });
  return outputFiles[0]?.text ?? "";
}

/** Whether public/reader.js is what its sources give; writes it where asked. */
export async function checkReaderScript(write: boolean): Promise<boolean> {
  const text = await bundleReaderScript();
  if (write) writeFileSync(readerScriptPath, text);
  return readFileSync(readerScriptPath, "utf8") === text;
}
