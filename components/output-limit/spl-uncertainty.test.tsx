import { renderToStaticMarkup } from "react-dom/server";
import { describe, expect, it } from "vitest";
import type { Band } from "@/lib/result/result-schema";
import { makeSampleResult } from "../../tests/support/sample-result";
import { SplUncertainty } from "./spl-uncertainty";

const render = (spl_uncertainty: Band["spl_uncertainty"]): string => {
  const [band] = makeSampleResult().bands;
  if (band === undefined) throw new Error("the sample has no band");
  return renderToStaticMarkup(<SplUncertainty band={{ ...band, spl_uncertainty }} />)
    .replaceAll(/<[^>]+>/g, " ")
    .replaceAll("\u00a0", " ")
    .replaceAll(/\s+/g, " ");
};

describe("SplUncertainty", () => {
  it("lists the parts of a budget with what they rest on", () => {
    const text = render({
      expanded_dB: 0.29,
      parts: [
        { name: "calibrator", standard_dB: 0.144, common: true, basis: "assumed class 1" },
        { name: "noise", standard_dB: 0.01, common: false, basis: "noise and rounding" },
      ],
    });
    expect(text).toContain("Absolute SPL ± 0.3 dB (k = 2, for this one unit)");
    expect(text).toContain("calibrator assumed class 1; the same for all bands 0.14 dB");
    expect(text).toContain("noise noise and rounding 0.01 dB");
  });

  it.each([null, undefined])("is nothing without one: %s", (budget) => {
    expect(render(budget)).toBe("");
  });
});
