/** A letter, whatever it says: one shape, drawn as text and as HTML. */

export interface Letter {
  subject: string;
  /** Stands over everything: the lab, or the product itself. */
  sender: string;
  heading: string;
  /** What happened and what to do, one paragraph each. */
  paragraphs: readonly string[];
  /** Label and value. */
  facts: readonly (readonly [string, string])[];
  /** Words of a person, as written. */
  quote: string | null;
  /** The one thing to do next. */
  action: { words: string; url: string } | null;
  /** After the action. */
  notes: readonly string[];
  /** Why it came to this address. */
  reason: string;
  /** Where notices are chosen; null where this one cannot be done without. */
  choicesUrl: string | null;
}

export interface ComposedMail {
  subject: string;
  text: string;
  html: string;
}

/** One line, whatever a name holds: a header must not be ended from inside. */
export const toOneLine = (text: string): string =>
  text
    .replaceAll(/[\p{Cc}\p{Z}]+/gu, " ")
    .trim()
    .slice(0, 200);
