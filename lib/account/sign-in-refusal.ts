/** Why a sign-in was refused, through the one short text that the sign-in library lets pass. */
import { z } from "zod";

const refusalSchema = z.discriminatedUnion("code", [
  z.object({ code: z.literal("auth.wrong"), triesLeft: z.number().int().min(0) }),
  z.object({ code: z.literal("auth.rate-limited"), waitS: z.number().min(0) }),
  z.object({ code: z.literal("database.unavailable") }),
  z.object({ code: z.literal("internal") }),
]);
export type SignInRefusal = z.infer<typeof refusalSchema>;

export const toRefusalText = (refusal: SignInRefusal): string => JSON.stringify(refusal);

/** @returns "internal" for any text that is not ours. */
export function parseRefusal(text: string): SignInRefusal {
  try {
    return refusalSchema.parse(JSON.parse(text));
  } catch {
    return { code: "internal" };
  }
}

/** One sentence for the form. */
export function toRefusalWords(refusal: SignInRefusal): string {
  if (refusal.code === "auth.wrong") {
    const left =
      refusal.triesLeft === 0
        ? "No try is left for now."
        : `${refusal.triesLeft} ${refusal.triesLeft === 1 ? "try is" : "tries are"} left.`;
    return `Address or password is wrong. ${left}`;
  }
  if (refusal.code === "auth.rate-limited") {
    const minutes = Math.max(1, Math.ceil(refusal.waitS / 60));
    return `Too many attempts. Try again in ${minutes} ${minutes === 1 ? "minute" : "minutes"}.`;
  }
  return refusal.code === "database.unavailable"
    ? "The database cannot be reached at the moment. Try again in a minute."
    : "Sign-in did not work, and it is our fault. Try again.";
}
