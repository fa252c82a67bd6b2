import { comparePaint } from "@/lib/charts/compare-paints";
import { COLOURS, toCss } from "@/lib/charts/tokens";
import { letterOf } from "@/lib/compare/compare-words";

/** The letter of a compared test, in its colour. @param at 0 is the reference, A. */
export function LetterBox({ at }: { at: number }) {
  return (
    <svg width="22" height="22" viewBox="0 0 22 22" className="flex-none" aria-hidden="true">
      <rect width="22" height="22" rx="1" fill={toCss(comparePaint(at))} />
      <text
        x="11"
        y="15.5"
        textAnchor="middle"
        fontSize="13"
        fontWeight="600"
        fill={toCss(COLOURS.sheet)}
        className="figures"
      >
        {letterOf(at)}
      </text>
    </svg>
  );
}
