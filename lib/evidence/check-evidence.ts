/** What the analysis command says of a folder that carries evidence.json: engine, inputs, result. */
import type { Warning } from "../result/result-schema";
import { type Evidence, EVIDENCE_FILE, evidenceSchema } from "./evidence-schema";

/** @returns null, with a warning, where the text is no evidence. */
export function parseEvidence(text: string): { evidence: Evidence | null; warnings: Warning[] } {
  const parsed = evidenceSchema.safeParse(parseJson(text));
  if (parsed.success) return { evidence: parsed.data, warnings: [] };
  const message = `${EVIDENCE_FILE} cannot be read, so nothing is held against it. Unpack the evidence again.`;
  return {
    evidence: null,
    warnings: [{ code: "evidence.invalid", message, file: EVIDENCE_FILE }],
  };
}

/** Before the work begins. @param digests SHA-256 by name, of the inputs that are there. */
export function checkInputs(
  { engine, inputs }: Evidence,
  engineVersion: string,
  digests: ReadonlyMap<string, string>,
): Warning[] {
  const changed = inputs
    .filter(({ file, sha256 }) => digests.get(file) !== sha256)
    .map(({ file }): Warning => {
      const message = `${file} is not the file of the evidence: its SHA-256 is another, so the result may be, too.`;
      return { code: "evidence.changed", message, file };
    });
  return [...toEngineWarning(engine, engineVersion), ...changed];
}

function toEngineWarning(engine: Evidence["engine"], engineVersion: string): Warning[] {
  if (engine.version === engineVersion) return [];
  const source = engine.source_commit === null ? "" : ` (source ${engine.source_commit})`;
  const message = `The published result was computed by engine ${engine.version}${source}, and this is engine ${engineVersion}: figures may differ. That engine gives the same bytes.`;
  return [{ code: "engine.differs", message }];
}

/** After the work. @param before what checkInputs found: then another result is no surprise. */
export function checkResult(
  { result_digest }: Evidence,
  resultDigest: string,
  before: readonly Warning[],
): Warning[] {
  if (resultDigest === result_digest || before.length > 0) return [];
  const message = `The result is not the published one: its SHA-256 is ${resultDigest}, published was ${result_digest}.`;
  return [{ code: "result.differs", message }];
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return undefined;
  }
}
