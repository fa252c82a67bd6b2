import { createHash } from "node:crypto";
import * as z from "zod";
import { signedDecisionSchema, type Decision, type SignedDecision } from "./review-schema";

/**
 * The decisions of an analysis as a sign-off binds them.
 *
 * @param inForce [any order] the newest version of each band; open ones have cause null.
 * @returns rising frequency; null until every band is decided.
 */
export function toSignedDecisions(
  inForce: readonly Decision[],
  bandsHz: readonly number[],
): SignedDecision[] | null {
  const signed: SignedDecision[] = [];
  for (const hz of bandsHz.toSorted((a, b) => a - b)) {
    const decision = inForce.find((one) => one.nominal_Hz === hz);
    if (decision === undefined || decision.cause === null) return null;
    const { nominal_Hz, cause, computed_cause, reason, by, at } = decision;
    signed.push({ nominal_Hz, cause, computed_cause, reason, by: by.name, at });
  }
  return signed.length === 0 ? null : signed;
}

/** Compact JSON in the order of the schema: the bytes that are digested. */
export const toDecisionsText = (decisions: readonly SignedDecision[]): string =>
  JSON.stringify(z.array(signedDecisionSchema).parse(decisions));

/** SHA-256 of toDecisionsText, hex. */
export const digestDecisions = (decisions: readonly SignedDecision[]): string =>
  digestText(toDecisionsText(decisions));

export const digestText = (text: string): string => createHash("sha256").update(text).digest("hex");
