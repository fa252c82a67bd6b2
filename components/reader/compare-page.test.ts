import { describe, expect, it } from "vitest";
import { compareTests } from "@/lib/compare/compare-tests";
import { fromSnapshot } from "@/lib/compare/compared-test";
import {
  choosePublished,
  listChoices,
  readPublishedFilter,
  toPublishedTest,
} from "@/lib/reader/published-list";
import { makeSampleSnapshot } from "@/tests/support/sample-publication";
import { toCompareBody } from "./compare-page";
import { toPublishedBody } from "./published-list";

const CRITERION = { compression_dB: 3 };
const name = (model: string) => {
  const snapshot = makeSampleSnapshot();
  return { ...snapshot, loudspeaker: { ...snapshot.loudspeaker, model } };
};
const KEYS = ["reedholm/osier", "reedholm/fennel", "reedholm/ketch"];
const SNAPSHOTS = [name("Osier <b>"), name("Fennel"), name("Ketch")];

describe("the comparison for readers", () => {
  const [a, b, c] = SNAPSHOTS;
  const ketch = { ...c!, measured: { ...c!.measured, environment: "ground-plane" as const } };
  const comparison = compareTests(
    [a!, b!, ketch].map((snapshot, at) =>
      fromSnapshot(snapshot, { id: KEYS[at] ?? "", path: `/t/${KEYS[at]}` }, CRITERION),
    ),
    { criterion: CRITERION, kind: "short-term" },
  );
  const { text } = toCompareBody({ comparison, keys: KEYS });

  it("stands with method line and notice, and escapes names", () => {
    expect(text).toContain("WARNING");
    expect(text).toContain("limit: 3\u00a0dB compression. Music differs.");
    expect(text).toContain("Osier &lt;b&gt;");
    expect(text).not.toContain("Osier <b>");
  });

  it("switches the reference and leaves tests out by plain links", () => {
    expect(text).toContain(
      'href="/published/compare?t=reedholm%2Ffennel,reedholm%2Fosier,reedholm%2Fketch"',
    );
    expect(text).toContain('href="/published/compare?t=reedholm%2Fosier,reedholm%2Fketch"');
    expect(text).toContain("<b>Ketch was left out.</b> It was measured on the ground plane;");
    expect(text).toContain('href="/published/compare/csv?t=reedholm%2Fosier,');
  });

  it("has the numbers of its figure as a table", () => {
    expect(text.match(/<th scope="row">/g)).toHaveLength(27 + 2);
    expect(text).toContain("no difference shown");
  });

  it("says how to begin while nothing is chosen", () => {
    expect(toCompareBody({ comparison: null, keys: [] }).text).toContain("Pick up to four tests");
  });
});

describe("the list of published tests", () => {
  const tests = SNAPSHOTS.map((snapshot, at) =>
    toPublishedTest(snapshot, KEYS[at]?.split("/")[1] ?? ""),
  );
  const draw = (query: string): string => {
    const filter = readPublishedFilter(new URLSearchParams(query));
    const found = choosePublished(tests, filter);
    return toPublishedBody({
      tests: found,
      found: found.length,
      total: tests.length,
      pages: 1,
      choices: listChoices(tests),
      chosen: filter.chosen.flatMap((key) => tests.find((test) => test.key === key) ?? []),
      filter,
    }).text;
  };

  it("takes a test into the tray and out of it, and keeps the filter", () => {
    expect(draw("kind=active")).toContain(
      'href="/published?kind=active&amp;t=reedholm%2Fosier#tray"',
    );
    const picked = draw("kind=active&t=reedholm/osier,reedholm/fennel");
    expect(picked).toContain(
      '<a class="go" href="/published/compare?t=reedholm%2Fosier,reedholm%2Ffennel">Compare 2</a>',
    );
    expect(picked).toContain("Take Fennel out");
    expect(picked).toContain(
      '<input type="hidden" name="t" value="reedholm/osier,reedholm/fennel"',
    );
  });

  it("offers no fifth", () => {
    const full = draw("t=reedholm/osier,reedholm/fennel,other/one,other/two");
    expect(full).not.toContain("Add to compare");
  });
});
