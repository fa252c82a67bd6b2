/** Puts tests side by side: who can stand there, differences by band, parts of the sound, what gives out first. */
import { PARTS_OF_SOUND } from "../reader/parts-of-sound";
import type {
  ComparedBand,
  ComparedPart,
  ComparedTest,
  Comparison,
  ComparisonTest,
} from "./comparison-schema";
import { isBracket, toDifference, toReach, type Reach } from "./difference";
import { PLACE_WORDS, toSpaceKind } from "./space";

/** A test that was asked for: as it is, or why it cannot be compared at all. */
export type Candidate =
  | { test: ComparedTest }
  | { id: string; maker: string; model: string; unfit: string };

/**
 * @param candidates in the order asked for; the first that can be compared is the reference.
 * @param criterion, kind what every limit in the candidates stands for.
 */
export function compareTests(
  candidates: readonly Candidate[],
  { criterion, kind }: Pick<Comparison, "criterion" | "kind">,
): Comparison {
  const reference = candidates.flatMap((one) => ("test" in one ? [one.test] : []))[0] ?? null;
  const tests: ComparedTest[] = [];
  const leftOut: Comparison["left_out"] = [];
  for (const candidate of candidates) {
    if (!("test" in candidate)) {
      const { id, maker, model, unfit } = candidate;
      leftOut.push({ id, maker, model, why: unfit });
      continue;
    }
    const { test } = candidate;
    const why = reference === null ? null : findUnlike(test, reference);
    if (why === null) tests.push(test);
    else leftOut.push({ id: test.id, maker: test.maker, model: test.model, why });
  }
  const bandsHz = [
    ...new Set(tests.flatMap((test) => test.bands.map((band) => band.nominal_Hz))),
  ].sort((a, b) => a - b);
  return {
    criterion,
    kind,
    bands_Hz: bandsHz,
    tests: tests.map((test) => toComparisonTest(test, reference, bandsHz)),
    left_out: leftOut,
  };
}

/** The sentence that stands with whatever is left out for its space or its criterion. */
export const SIDE_BY_SIDE =
  "Only tests in the same kind of space, under the same criterion, stand side by side.";

function findUnlike(test: ComparedTest, reference: ComparedTest): string | null {
  if (toSpaceKind(test.environment) === toSpaceKind(reference.environment)) return null;
  return `It was measured ${PLACE_WORDS[test.environment]}; ${reference.model} ${PLACE_WORDS[reference.environment]}. ${SIDE_BY_SIDE}`;
}

function toComparisonTest(
  test: ComparedTest,
  reference: ComparedTest | null,
  bandsHz: readonly number[],
): ComparisonTest {
  const isReference = reference === null || test === reference;
  return {
    ...test,
    first: toFirst(test.bands),
    parts: toParts(test, isReference ? null : reference),
    differences: isReference
      ? []
      : bandsHz.map((hz) => toDifference(reachAt(test, hz), reachAt(reference, hz))),
  };
}

const findBand = (test: ComparedTest, hz: number): ComparedBand | undefined =>
  test.bands.find((band) => band.nominal_Hz === hz);

function reachAt(test: ComparedTest, hz: number): Reach | null {
  const band = findBand(test, hz);
  return band === undefined ? null : toReach(band);
}

/** Bands past it from the start, the quietest of them; else the found limit with the lowest drive. */
function toFirst(bands: readonly ComparedBand[]): ComparisonTest["first"] {
  const below = lowestBy(
    bands.filter((band) => band.status === "below lowest"),
    (band) => band.spl_dB,
  );
  const found = lowestBy(
    bands.filter((band) => band.status === "found"),
    (band) => band.nominal_dB,
  );
  const first = below ?? found;
  if (first === null) return null;
  return {
    status: first === below ? "below lowest" : "found",
    nominal_Hz: first.nominal_Hz,
    spl_dB: first.spl_dB,
    nominal_dB: first.nominal_dB,
    bracket_dB:
      isBracket(first) && first.low_dB !== null && first.high_dB !== null
        ? [first.low_dB, first.high_dB]
        : null,
    cause: first.cause,
  };
}

function lowestBy(
  bands: readonly ComparedBand[],
  of: (band: ComparedBand) => number | null,
): ComparedBand | null {
  return bands.reduce<ComparedBand | null>(
    (low, band) =>
      (of(band) ?? Infinity) < (low === null ? Infinity : (of(low) ?? Infinity)) || low === null
        ? band
        : low,
    null,
  );
}

function toParts(test: ComparedTest, reference: ComparedTest | null): ComparedPart[] {
  return PARTS_OF_SOUND.flatMap(({ name, fromHz, toHz }) => {
    const within = (one: ComparedTest): ComparedBand[] =>
      one.bands.filter((band) => band.nominal_Hz >= fromHz && band.nominal_Hz <= toHz);
    const bands = within(test);
    const [first, last] = [bands[0], bands.at(-1)];
    if (first === undefined || last === undefined) return [];
    const weakest = lowestBy(
      bands.filter((band) => band.spl_dB !== null && band.status !== "not assessed"),
      (band) => band.spl_dB,
    );
    const below = bands.some((band) => band.status === "below lowest");
    const others = reference === null ? null : within(reference);
    return [
      {
        name,
        from_Hz: first.nominal_Hz,
        to_Hz: last.nominal_Hz,
        reached_dB: below ? null : (weakest?.spl_dB ?? null),
        at_least: !below && weakest?.status === "not reached",
        below_lowest: below,
        difference:
          others === null
            ? null
            : isSameBands(bands, others)
              ? toDifference(toPartReach(bands), toPartReach(others))
              : toDifference(null, null),
      },
    ];
  });
}

const isSameBands = (a: readonly ComparedBand[], b: readonly ComparedBand[]): boolean =>
  a.length === b.length && a.every((band, at) => band.nominal_Hz === b[at]?.nominal_Hz);

/** The weakest band speaks for the part; one that was not assessed might be weaker still. */
function toPartReach(bands: readonly ComparedBand[]): Reach | null {
  const reaches = bands.map(toReach);
  const known = reaches.filter((reach) => reach !== null);
  const [first, ...rest] = known;
  if (first === undefined || known.length < reaches.length) return null;
  const weakest = rest.reduce((low, reach) => (reach.levelDb < low.levelDb ? reach : low), first);
  return known.some((reach) => reach.open === "down") ? { ...weakest, open: "down" } : weakest;
}
