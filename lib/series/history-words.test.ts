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
    ["member.roles-changed", {}, "member roles changed", null],
    ["run.uploaded", { file: 7 }, "uploaded a recording", null],
  ])("%s %o", (act, details, words, reason) => {
    expect(toHistoryWords(act, details)).toEqual({ words, reason });
  });
});
