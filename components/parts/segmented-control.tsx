"use client";

import { useId, type ReactNode } from "react";
import { joinClasses } from "./join-classes";

export interface Segment<Value extends string> {
  value: Value;
  label: ReactNode;
  /** Count beside the words, lighter. */
  count?: number;
  disabled?: boolean;
}

interface SegmentedControlProps<Value extends string> {
  /** What is chosen, for readers; shown at the left unless `hideLegend`. */
  legend: string;
  hideLegend?: boolean;
  segments: readonly Segment<Value>[];
  value: Value;
  onChange: (value: Value) => void;
  /** Shares the width evenly and stands form-high. */
  wide?: boolean;
  className?: string;
}

/** One of a few: radio buttons side by side; arrows move between them. */
export function SegmentedControl<Value extends string>({
  legend,
  hideLegend = false,
  segments,
  value,
  onChange,
  wide = false,
  className,
}: SegmentedControlProps<Value>) {
  const name = useId();
  return (
    <fieldset
      className={joinClasses(
        wide ? "w-full" : "inline-flex min-w-0 items-center gap-2.5",
        className,
      )}
    >
      <legend
        className={joinClasses(
          "figures text-label text-ink-2",
          hideLegend ? "sr-only" : wide ? "mb-[5px]" : "float-left",
        )}
      >
        {legend}
      </legend>
      <span
        className={joinClasses(
          "flex min-w-0 overflow-x-auto rounded-control border border-edge bg-sheet p-px focus-within:overflow-visible",
          wide && "w-full",
        )}
      >
        {segments.map((segment) => (
          <label
            key={segment.value}
            className={joinClasses(
              "figures relative flex items-center justify-center gap-1.5 border-l border-rule px-[11px] text-label font-medium whitespace-nowrap text-ink-2 first:border-l-0",
              wide
                ? "flex-1 py-2.5 text-center whitespace-normal!"
                : "py-[6px] max-md:min-h-[42px]",
              "not-has-checked:not-has-disabled:hover:bg-wash has-checked:bg-ink has-checked:text-on-ink has-disabled:text-ink-3 has-disabled:line-through",
              "has-focus-visible:z-10 has-focus-visible:outline-3 has-focus-visible:outline-offset-2 has-focus-visible:outline-overprint",
            )}
          >
            <input
              type="radio"
              className="absolute inset-0 m-0 appearance-none outline-none!"
              name={name}
              value={segment.value}
              checked={segment.value === value}
              disabled={segment.disabled}
              onChange={() => onChange(segment.value)}
            />
            {segment.label}
            {segment.count !== undefined && (
              <span className="font-normal opacity-80">{segment.count}</span>
            )}
          </label>
        ))}
      </span>
    </fieldset>
  );
}
