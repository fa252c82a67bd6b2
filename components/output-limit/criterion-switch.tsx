"use client";

import { formatCriterionPercent, formatPlain, NBSP } from "@/lib/charts/format";
import type { CriterionParts } from "@/lib/result/criteria";
import type { Criterion } from "@/lib/series/series-schema";
import { SegmentedControl } from "../parts/segmented-control";

interface CriterionSwitchProps {
  parts: CriterionParts;
  criterion: Criterion;
  onChange: (criterion: Criterion) => void;
}

/** THD and compression together, whichever comes first; both off is not offered. */
export function CriterionSwitch({ parts, criterion, onChange }: CriterionSwitchProps) {
  const { thd_percent: thd, compression_dB: compression } = criterion;
  return (
    <div className="flex flex-wrap items-center gap-x-4 gap-y-2">
      {parts.thdPercents.length > 0 && (
        <SegmentedControl
          legend="THD"
          value={thd === undefined ? "off" : String(thd)}
          segments={[
            ...parts.thdPercents.map((percent) => ({
              value: String(percent),
              label: formatCriterionPercent(percent),
            })),
            { value: "off", label: "off", disabled: compression === undefined },
          ]}
          onChange={(value) => onChange(toCriterion(value, compression, "thd"))}
        />
      )}
      {parts.compressionDbs.length > 0 && (
        <SegmentedControl
          legend="compression"
          value={compression === undefined ? "off" : String(compression)}
          segments={[
            ...parts.compressionDbs.map((lossDb) => ({
              value: String(lossDb),
              label: `${formatPlain(lossDb)}${NBSP}dB`,
            })),
            { value: "off", label: "off", disabled: thd === undefined },
          ]}
          onChange={(value) => onChange(toCriterion(value, thd, "compression"))}
        />
      )}
    </div>
  );
}

function toCriterion(
  value: string,
  other: number | undefined,
  half: "thd" | "compression",
): Criterion {
  const number = value === "off" ? undefined : Number(value);
  const [thd, compression] = half === "thd" ? [number, other] : [other, number];
  return {
    ...(thd === undefined ? {} : { thd_percent: thd }),
    ...(compression === undefined ? {} : { compression_dB: compression }),
  };
}
