/** Demo series on their way to readers: by the acts of the members, once, and under the two-person rule. */
import { beforeAll, describe, expect, it } from "vitest";
import { inLab } from "../../db/in-lab";
import { listPublications, listPublishedIds } from "../../db/queries/publications";
import { getSeries } from "../../db/queries/series";
import { publishDemoSeries } from "../../scripts/demo/publish-series";
import type { SeededLab } from "../../scripts/demo/seed-people";
import { makeReviewableSeries } from "../support/reviewable";
import { makeSampleResult } from "../support/sample-result";
import { makeLab, makeMember, openDatabase, type Lab } from "./support";

const bench = openDatabase();
let lab: Lab;
let seeded: SeededLab;
beforeAll(async () => {
  lab = await makeLab(bench, "demo");
  const analyst = await makeMember(bench, lab.id, "analyst@demo.test", ["analyst"]);
  seeded = {
    labId: lab.id,
    testerId: lab.admin.accountId,
    analystId: analyst.accountId,
    reviewerId: lab.admin.accountId,
  };
});

/** As the plan of a demo series asks for it. */
function makeJudgedResult() {
  const result = makeSampleResult();
  result.settings.criteria.push({ thd_percent: 10, compression_dB: 3 });
  return result;
}

const PUBLISHED = { suppliedBy: "bought by the lab", words: "Plays." };

describe("publishing a demo series", () => {
  it("decides, signs and publishes once, however often it is asked", async () => {
    const { seriesId } = await makeReviewableSeries(bench, lab.admin, {
      result: makeJudgedResult(),
    });
    expect(await publishDemoSeries(bench.app, seeded, seriesId, PUBLISHED)).toBe(true);
    expect(await publishDemoSeries(bench.app, seeded, seriesId, PUBLISHED)).toBe(true);
    const { state, revisions } = await inLab(bench.app, lab.admin, async (trx) => ({
      state: (await getSeries(trx, lab.id, seriesId)).state,
      revisions: await listPublications(trx, lab.id, seriesId),
    }));
    expect(state).toBe("signed off");
    expect(revisions.map((one) => [one.revision, one.state])).toEqual([[1, "live"]]);
    expect((await listPublishedIds(bench.app)).map((one) => one.publicationId)).toEqual([
      revisions[0]?.id,
    ]);
  });

  it("is held to the two-person rule like anybody", async () => {
    const { seriesId } = await makeReviewableSeries(bench, lab.admin, {
      model: "Fennel 5",
      result: makeJudgedResult(),
    });
    const alone = { ...seeded, analystId: lab.admin.accountId };
    await expect(publishDemoSeries(bench.app, alone, seriesId, PUBLISHED)).rejects.toThrow(
      /uploaded|two/i,
    );
  });
});
