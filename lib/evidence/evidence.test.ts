import { describe, expect, it } from "vitest";
import { makeSampleFacts } from "../../tests/support/sample-publication";
import { makeSampleResult } from "../../tests/support/sample-result";
import { toSnapshotText } from "../publication/canonical";
import { toSnapshot } from "../publication/to-snapshot";
import { toResultText } from "../result/result-text";
import { digestText, toDecisionsText } from "../review/digest-decisions";
import { checkInputs, checkResult, parseEvidence } from "./check-evidence";
import type { PackFile } from "./pack-file";
import { toEvidencePack, type EvidenceFacts } from "./to-evidence";

function makeFacts(): EvidenceFacts {
  const facts = makeSampleFacts();
  const resultText = toResultText(makeSampleResult());
  const decisionsText = toDecisionsText(facts.signOff.decisions);
  const signOff = {
    ...facts.signOff,
    resultDigest: digestText(resultText),
    decisionsDigest: digestText(decisionsText),
  };
  return {
    snapshotText: toSnapshotText(toSnapshot({ ...facts, signOff })),
    inputs: [
      { name: "series.json", text: "{}\n" },
      { name: "osier8a_76_short.wav", digest: "ab".repeat(32), bytes: 1000 },
    ],
    resultText,
    decisionsText,
    sourceCommit: "c0ffee",
    publicUrl: "https://tidemark.test",
    folder: "osier-8a-1",
  };
}

const textOf = (pack: readonly PackFile[], name: string): string => {
  const file = pack.find((one) => one.name === name);
  return file !== undefined && "text" in file ? file.text : "";
};

describe("toEvidencePack", () => {
  const facts = makeFacts();
  const pack = toEvidencePack(facts);

  it("lists every file but the list itself, with the digest of its bytes", () => {
    const sums = textOf(pack, "SHA256SUMS").trimEnd().split("\n");
    expect(sums.map((line) => line.slice(66)).toSorted()).toEqual(
      pack
        .map(({ name }) => name)
        .filter((name) => name !== "SHA256SUMS")
        .toSorted(),
    );
    expect(sums).toContain(`${"ab".repeat(32)}  osier8a_76_short.wav`);
    expect(sums).toContain(`${digestText(facts.resultText)}  result.json`);
  });

  it("tells the command, the source and the hearing notice in its README", () => {
    const readme = textOf(pack, "README.txt");
    expect(readme).toContain("npm run --silent analyse -- ../osier-8a-1 --out ../again.json");
    expect(readme).toContain("Commit of its source: c0ffee");
    expect(readme).toMatch(/CAUTION|WARNING/);
    expect(readme).toContain("https://tidemark.test/t/");
  });

  it("refuses a result or decisions that are not those that were published", () => {
    expect(() => toEvidencePack({ ...facts, resultText: `${facts.resultText} ` })).toThrow(
      "result kept",
    );
    expect(() => toEvidencePack({ ...facts, decisionsText: "[]" })).toThrow("decisions kept");
  });
});

describe("a folder with evidence", () => {
  const { evidence } = parseEvidence(textOf(toEvidencePack(makeFacts()), "evidence.json"));
  if (evidence === null) throw new Error("the pack's own evidence was not read");
  const digests = new Map(evidence.inputs.map(({ file, sha256 }) => [file, sha256]));
  const { version } = evidence.engine;

  it("is silent where nothing differs", () => {
    expect(checkInputs(evidence, version, digests)).toEqual([]);
    expect(checkResult(evidence, evidence.result_digest, [])).toEqual([]);
  });

  it.each([
    ["another engine", "9.0.0", digests, ["engine.differs"]],
    [
      "a changed recording",
      version,
      new Map([...digests, ["series.json", "0"]]),
      ["evidence.changed"],
    ],
    ["a lost recording", version, new Map([...digests].slice(0, 1)), ["evidence.changed"]],
  ])("warns of %s", (_what, engine, found, codes) => {
    const warnings = checkInputs(evidence, engine, found);
    expect(warnings.map(({ code }) => code)).toEqual(codes);
    expect(checkResult(evidence, "0", warnings)).toEqual([]);
  });

  it("warns of another result only where nothing explains it", () => {
    expect(checkResult(evidence, "0", []).map(({ code }) => code)).toEqual(["result.differs"]);
  });

  it.each(["", "{", "{}", '{"format":"tidemark-evidence-2"}'])("%s is no evidence", (text) => {
    const { evidence: none, warnings } = parseEvidence(text);
    expect(none).toBeNull();
    expect(warnings.map(({ code }) => code)).toEqual(["evidence.invalid"]);
  });
});
