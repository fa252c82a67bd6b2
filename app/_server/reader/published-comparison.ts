/** Published tests side by side, under the limit that the first of them was signed for. */
import { compareTests } from "../../../lib/compare/compare-tests";
import { fromSnapshot } from "../../../lib/compare/compared-test";
import type { Comparison } from "../../../lib/compare/comparison-schema";
import { listPublishedTests, readSnapshots } from "./published-tests";

/** @param keys "lab/series", the reference first. @returns null where none is published. */
export async function comparePublished(keys: readonly string[]): Promise<Comparison | null> {
  if (keys.length === 0) return null;
  const all = await listPublishedTests();
  const tests = keys.flatMap((key) => all.find((test) => test.key === key) ?? []);
  const snapshots = await readSnapshots(tests);
  const chosen = tests.flatMap((test) => {
    const snapshot = snapshots.get(test.publicationId);
    return snapshot === undefined ? [] : [{ test, snapshot }];
  });
  const reference = chosen.find(({ snapshot }) => snapshot.spl_valid) ?? chosen[0];
  if (reference === undefined) return null;
  const { criterion } = reference.snapshot;
  const comparison = compareTests(
    chosen.map(({ test, snapshot }) =>
      fromSnapshot(snapshot, { id: test.key, path: test.path }, criterion),
    ),
    { criterion, kind: "short-term" },
  );
  const missing = keys.filter((key) => !tests.some((test) => test.key === key));
  return {
    ...comparison,
    left_out: [
      ...comparison.left_out,
      ...missing.map((key) => ({
        id: key,
        maker: "",
        model: `The test at ${key}`,
        why: "It is not published, or no longer.",
      })),
    ],
  };
}
