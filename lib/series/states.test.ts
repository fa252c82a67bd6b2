import { describe, expect, it } from "vitest";
import { toSeriesState, toSeriesSteps, type SeriesFacts } from "./states";

const facts = (over: Partial<SeriesFacts>): SeriesFacts => ({
  begun: false,
  captured: 0,
  planned: 7,
  analysis: null,
  signedOff: false,
  ...over,
});

describe("toSeriesState", () => {
  it.each([
    ["nothing in", {}, "planned"],
    ["a recording in", { begun: true, captured: 1 }, "capturing"],
    ["a recording that was not usable", { begun: true, captured: 0 }, "capturing"],
    ["all in, not started", { begun: true, captured: 7 }, "capturing"],
    ["waiting for a worker", { begun: true, captured: 7, analysis: "queued" }, "analysing"],
    ["at work", { begun: true, captured: 7, analysis: "running" }, "analysing"],
    ["failed", { begun: true, captured: 7, analysis: "failed" }, "analysis failed"],
    ["done", { begun: true, captured: 7, analysis: "done" }, "in review"],
    ["done before all are in", { begun: true, captured: 3, analysis: "done" }, "in review"],
    ["signed off", { begun: true, analysis: "done", signedOff: true }, "signed off"],
  ] as const)("%s", (_name, over, state) => {
    expect(toSeriesState(facts(over))).toBe(state);
  });
});

describe("toSeriesSteps", () => {
  const steps = (over: Partial<SeriesFacts>, progress = 0) =>
    toSeriesSteps({
      ...facts(over),
      progress,
      capturedNote: null,
      analysedNote: null,
      signedOffNote: "11 May, M. Oduya",
      bands: { total: 27, decided: 12 },
      publishedNote: null,
    });

  it("fills the review by bands, and the sign-off at once", () => {
    const open = steps({ captured: 7, analysis: "done" }, 1);
    expect(open[2]).toMatchObject({ share: 12 / 27, done: false, detail: "12 of 27 bands" });
    expect(open[3]).toMatchObject({ share: 0, done: false, detail: "needs analyst" });
    const signed = steps({ captured: 7, analysis: "done", signedOff: true }, 1);
    expect(signed[2]).toMatchObject({ share: 1, done: true });
    expect(signed[3]).toMatchObject({ share: 1, done: true, detail: "11 May, M. Oduya" });
  });

  it("fills the last box while a publication is live", () => {
    const published = toSeriesSteps({
      ...facts({ signedOff: true }),
      progress: 0,
      capturedNote: null,
      analysedNote: null,
      signedOffNote: null,
      bands: { total: 0, decided: 0 },
      publishedNote: "14 May, N. Okell",
    });
    expect(published.at(-1)).toEqual({
      step: "published",
      share: 1,
      done: true,
      detail: "14 May, N. Okell",
    });
    expect(steps({}).at(-1)).toMatchObject({ done: false, detail: "needs reviewer" });
  });

  it.each([
    ["none in", {}, 0, [0, 0], "0 of 7 recordings", "starts by itself"],
    ["five in", { captured: 5 }, 0, [5 / 7, 0], "5 of 7 recordings", "starts by itself"],
    [
      "under way",
      { captured: 7, analysis: "running" },
      0.45,
      [1, 0.45],
      "all recordings are in",
      "under way",
    ],
    [
      "failed",
      { captured: 7, analysis: "failed" },
      0.45,
      [1, 0],
      "all recordings are in",
      "failed, needs tester",
    ],
    ["done", { captured: 7, analysis: "done" }, 1, [1, 1], "all recordings are in", "done"],
  ] as const)("%s", (_name, over, progress, shares, captured, analysed) => {
    const [first, second] = steps(over, progress);
    expect([first?.share, second?.share]).toEqual(shares);
    expect([first?.detail, second?.detail]).toEqual([captured, analysed]);
  });

  it("never fills a box over its rim, nor divides by an empty plan", () => {
    expect(steps({ captured: 9 })[0]?.share).toBe(1);
    expect(steps({ planned: 0 })[0]).toMatchObject({ share: 0, done: false });
  });
});
