"use client";

import { sayComponent, THD, type Component } from "@/lib/charts/distortion-parts";
import { HARMONIC_ORDERS } from "@/lib/charts/harmonic-lines";
import { Checkbox } from "../parts/checkbox";

interface ComponentPickerProps {
  shown: readonly Component[];
  onChange: (shown: Component[]) => void;
}

const ALL: readonly Component[] = [THD, ...HARMONIC_ORDERS];

/** Which lines are drawn. */
export function ComponentPicker({ shown, onChange }: ComponentPickerProps) {
  return (
    <fieldset className="flex flex-wrap items-center gap-x-4 gap-y-1">
      <legend className="sr-only">Lines shown</legend>
      {ALL.map((component) => (
        <Checkbox
          key={component}
          figures
          checked={shown.includes(component)}
          onChange={() =>
            onChange(
              ALL.filter((one) => (one === component ? !shown.includes(one) : shown.includes(one))),
            )
          }
        >
          {sayComponent(component)}
        </Checkbox>
      ))}
      <span className="figures ml-auto text-label text-ink-2">
        round marks: even · square marks: odd
      </span>
    </fieldset>
  );
}
