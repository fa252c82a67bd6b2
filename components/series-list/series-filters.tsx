"use client";

import { useEffect, useState } from "react";
import type { Criterion } from "@/lib/series/series-schema";
import { SERIES_STATES, type SeriesState } from "@/lib/series/vocabulary";
import { toCriterionKey } from "@/lib/result/criteria";
import { Button } from "../parts/button";
import { Checkbox } from "../parts/checkbox";
import { Select, TextInput } from "../parts/field";
import { SegmentedControl } from "../parts/segmented-control";
import type { ListView } from "./list-address";
import { toCriterionShort } from "./list-words";

interface SeriesFiltersProps {
  view: ListView;
  /** Counts by state; the search counts, the state does not. */
  byState: Readonly<Record<string, number>>;
  criteria: readonly Criterion[];
  onChange: (change: Partial<ListView>) => void;
  /** Left out where there is nothing to save. */
  onCsv?: (() => void) | undefined;
}

const PAUSE_MS = 250;
type StateChoice = SeriesState | "all";

export function SeriesFilters({ view, byState, criteria, onChange, onCsv }: SeriesFiltersProps) {
  const all = Object.values(byState).reduce((sum, count) => sum + count, 0);
  const shown = SERIES_STATES.filter(
    (state) => state !== "analysis failed" || (byState[state] ?? 0) > 0 || view.state === state,
  );
  return (
    <div className="flex flex-wrap items-center gap-3 px-gutter pb-3.5 max-md:px-phone">
      <SearchField search={view.search} onSearch={(search) => onChange({ search, page: 1 })} />
      <SegmentedControl<StateChoice>
        legend="State"
        hideLegend
        className="max-w-full min-w-0"
        value={view.state ?? "all"}
        onChange={(state) => onChange({ state: state === "all" ? null : state, page: 1 })}
        segments={[
          { value: "all", label: "all", count: all },
          ...shown.map((state) => ({ value: state, label: state, count: byState[state] ?? 0 })),
        ]}
      />
      <label className="inline-flex items-center">
        <span className="sr-only">Criterion of the limits</span>
        <Select
          size="normal"
          figures
          value={view.criterion}
          onChange={(event) => onChange({ criterion: event.target.value })}
        >
          {criteria.map((criterion) => (
            <option key={toCriterionKey(criterion)} value={toCriterionKey(criterion)}>
              {toCriterionShort(criterion)}
            </option>
          ))}
        </Select>
      </label>
      <span className="flex-1" />
      <Checkbox
        className="text-small text-ink-2"
        checked={view.archived === "yes"}
        onChange={(event) => onChange({ archived: event.target.checked ? "yes" : "no", page: 1 })}
      >
        archived
      </Checkbox>
      {onCsv !== undefined && (
        <Button tone="quiet" size="small" onClick={onCsv}>
          CSV
        </Button>
      )}
    </div>
  );
}

/** Asks when the typing rests; Enter asks at once. */
function SearchField({ search, onSearch }: { search: string; onSearch: (text: string) => void }) {
  const [text, setText] = useState(search);
  const [given, setGiven] = useState(search);
  if (search !== given) {
    // The address changed from elsewhere: back button, filters cleared.
    setGiven(search);
    setText(search);
  }
  useEffect(() => {
    if (text === given) return undefined;
    const timer = setTimeout(() => onSearch(text), PAUSE_MS);
    return () => clearTimeout(timer);
  }, [text, given, onSearch]);
  return (
    <form
      aria-label="Filter the list"
      className="max-md:w-full"
      onSubmit={(event) => {
        event.preventDefault();
        onSearch(text);
      }}
    >
      <TextInput
        size="normal"
        type="search"
        aria-label="Filter by name or maker"
        placeholder="Name or maker"
        maxLength={120}
        className="w-[190px] max-md:w-full"
        value={text}
        onChange={(event) => setText(event.target.value)}
      />
    </form>
  );
}
