/** The kernel of the engine, compiled from its source; kept beside it as text, so that nothing is compiled where it runs. */
import { execFileSync } from "node:child_process";
import { copyFileSync, mkdtempSync, readFileSync, rmSync, writeFileSync } from "node:fs";
import { tmpdir } from "node:os";
import { join } from "node:path";
import { cloneDir } from "./bootstrap.mjs";
import { packageFile } from "./package-file";

const folder = join(cloneDir, "lib", "analysis", "kernel");
const sourcePath = join(folder, "kernel.as");
const bytesPath = join(folder, "kernel-bytes.ts");
const OPTIONS = ["-O3", "--enable", "simd", "--runtime", "stub", "--importMemory", "--noAssert"];
const LETTERS_PER_LINE = 92;

/** @returns the text of kernel-bytes.ts as its source gives it. */
function compileKernel(): string {
  // The compiler takes files of its own ending only, relative to where it stands.
  const cwd = mkdtempSync(join(tmpdir(), "tidemark-kernel-"));
  try {
    copyFileSync(sourcePath, join(cwd, "kernel.ts"));
    const compiler = packageFile("assemblyscript/bin/asc.js");
    const args = [compiler, "kernel.ts", "--outFile", "kernel.wasm", ...OPTIONS];
    execFileSync(process.execPath, args, { cwd });
    return toText(readFileSync(join(cwd, "kernel.wasm")).toString("base64"));
  } finally {
    rmSync(cwd, { recursive: true });
  }
}

function toText(base64: string): string {
  const lines = base64.match(new RegExp(`.{1,${LETTERS_PER_LINE}}`, "g")) ?? [];
  return [
    "/** WebAssembly of kernel.as in base64, written by scripts/entries/kernel.ts. */",
    "export const KERNEL_BASE64 = [",
    ...lines.map((line) => `  "${line}",`),
    '].join("");',
    "",
  ].join("\n");
}

/** Whether kernel-bytes.ts is what its source gives; writes it where asked. */
export function checkKernel(write: boolean): boolean {
  const text = compileKernel();
  if (write) writeFileSync(bytesPath, text);
  return readFileSync(bytesPath, "utf8") === text;
}
