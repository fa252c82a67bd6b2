import { describe, expect, it } from "vitest";
import { toHistoryWords } from "./history-words";

describe("toHistoryWords", () => {
  it.each([
    [
      "run.uploaded",
      { file: "91.wav", label: "91 dB short-term" },
      "uploaded 91.wav for 91 dB short-term",
      null,
    ],
    ["run.uploaded", { file: "take.wav", label: null }, "uploaded take.wav", null],
    [
      "run.checked",
      { file: "91.wav", label: "91 dB", state: "failed" },
      "91.wav for 91 dB failed its checks",
      null,
    ],
    [
      "run.kept",
      { file: "91.wav", reason: "for the woofer" },
      "kept 91.wav in spite of its checks",
      "for the woofer",
    ],
    [
      "slot.excused",
      { label: "room noise", reason: "quiet chamber" },
      "excused room noise",
      "quiet chamber",
    ],
    ["analysis.done", { version: 3 }, "analysis version 3 is done", null],
    [
      "decision.taken",
      { decisions: [{ nominal_Hz: 63, cause: "port", computed_cause: "limiter", reason: "air" }] },
      "changed 63\u00a0Hz from limiter to port",
      "air",
    ],
    [
      "decision.taken",
      {
        decisions: [50, 63].map((nominal_Hz) => ({
          nominal_Hz,
          cause: "none",
          computed_cause: "none",
          reason: null,
        })),
      },
      "confirmed 2 bands, 50\u00a0Hz to 63\u00a0Hz",
      null,
    ],
    [
      "decision.taken",
      { decisions: [{ nominal_Hz: 63, cause: null, computed_cause: "limiter", reason: null }] },
      "opened 63\u00a0Hz again",
      null,
    ],
    [
      "series.signed-off",
      { version: 3, criterion: "THD 10 % or compression 3 dB" },
      "signed off version 3 for THD 10 % or compression 3 dB",
      null,
    ],
    [
      "series.reopened",
      { version: 3, reason: "new run" },
      "took back the sign-off of version 3",
      "new run",
    ],
    ["member.roles-changed", {}, "member roles changed", null],
    ["run.uploaded", { file: 7 }, "uploaded a recording", null],
  ])("%s %o", (act, details, words, reason) => {
    expect(toHistoryWords(act, details)).toEqual({ words, reason });
  });
});
