/**
 * The checks built with some constants of the product's code movable: each literal is replaced by a
 * look-up that falls back to it, and the whole is evaluated afresh for each move.
 */
import { readFileSync } from "node:fs";
import { join, relative } from "node:path";
import { build } from "esbuild";
import type { Check } from "../../lib/checks/check";

const root = join(import.meta.dirname, "../..");

export interface Constant {
  /** Unique. */
  name: string;
  file: string;
  /** Source text around the literal, which stands in it once between « and ». */
  text: string;
}

export type CheckValues = (
  ids: readonly string[],
  moved?: Record<string, number>,
) => Promise<number[]>;

const toParts = ({ name, text }: Constant): { before: string; literal: string; after: string } => {
  const match = /^([^]*)«([^«»]+)»([^]*)$/.exec(text);
  if (match === null) throw new Error(`${name}: no literal between « and »`);
  return { before: match[1] ?? "", literal: match[2] ?? "", after: match[3] ?? "" };
};

/** Value of the literal as the code has it. */
export function toLiteral(constant: Constant): number {
  const value = Number(toParts(constant).literal.replaceAll("_", ""));
  if (!Number.isFinite(value)) throw new Error(`${constant.name} is no number`);
  return value;
}

function makeMovable(source: string, constants: readonly Constant[]): string {
  const places = constants.map((constant) => {
    const { before, literal, after } = toParts(constant);
    const at = source.indexOf(`${before}${literal}${after}`);
    if (at < 0 || source.includes(`${before}${literal}${after}`, at + 1)) {
      throw new Error(`${constant.name} does not stand just once in ${constant.file}`);
    }
    return { name: constant.name, literal, at: at + before.length };
  });
  return places
    .toSorted((a, b) => b.at - a.at)
    .reduce(
      (text, { name, literal, at }) =>
        `${text.slice(0, at)}(moved[${JSON.stringify(name)}] ?? ${literal})${text.slice(at + literal.length)}`,
      source,
    );
}

interface Loaded {
  exports: { CHECKS?: readonly Check[] };
}
type Evaluate = (
  moved: Record<string, number>,
  require: NodeJS.Require,
  module: Loaded,
  exports: Loaded["exports"],
) => void;

export async function buildMovableChecks(constants: readonly Constant[]): Promise<CheckValues> {
  const result = await build({
    absWorkingDir: root,
    stdin: {
      contents: 'export { CHECKS } from "./lib/checks/checks";',
      resolveDir: root,
      loader: "ts",
    },
    bundle: true,
    write: false,
    platform: "node",
    format: "cjs",
    logLevel: "error",
    plugins: [
      {
        name: "movable",
        setup: (bundler) => {
          bundler.onLoad({ filter: /[/\\]lib[/\\].*\.ts$/ }, ({ path }) => {
            const file = relative(root, path);
            const own = constants.filter((constant) => constant.file === file);
            return { contents: makeMovable(readFileSync(path, "utf8"), own), loader: "ts" };
          });
        },
      },
    ],
  });
  const code = result.outputFiles[0]?.text ?? "";
  const require = process.getBuiltinModule("node:module").createRequire(import.meta.url);
  // oxlint-disable-next-line typescript/no-implied-eval -- our own code, with its constants moved
  const evaluate = new Function("moved", "require", "module", "exports", code) as Evaluate;
  return async (ids, moved = {}) => {
    const loaded: Loaded = { exports: {} };
    evaluate(moved, require, loaded, loaded.exports);
    const checks = new Map((loaded.exports.CHECKS ?? []).map((check) => [check.id, check]));
    const values: number[] = [];
    for (const id of ids) {
      const check = checks.get(id);
      if (check === undefined) throw new Error(`no check ${id}`);
      values.push(await check.compute());
    }
    return values;
  };
}
