/** A row of the list for the tests of this folder. */
import type { ListLimits, SeriesRow } from "@/lib/api/series";

export function makeLimits(change: Partial<ListLimits> = {}): ListLimits {
  const criterion = { thd_percent: 10, compression_dB: 3 };
  return {
    criterion,
    wall: [{ nominal_Hz: 63, status: "found", spl_dB: 94.9, reached_dB: 96 }],
    headline: {
      criterion,
      from_Hz: 80,
      to_Hz: 16_000,
      spl_dB: 101.7,
      at_least: true,
      first: { status: "found", nominal_Hz: 50, spl_dB: 93.9, nominal_dB: 96.2, ceiling: true },
    },
    headline_missing: null,
    first_cause: "limiter",
    ...change,
  };
}

export function makeRow(change: Partial<SeriesRow> = {}): SeriesRow {
  return {
    id: "5f0c2b8e-0000-4000-8000-000000000231",
    number: "S-0231",
    loudspeaker: {
      id: "5f0c2b8e-0000-4000-8000-000000000001",
      maker: "Withy Lane",
      model: "Osier 8A",
      kind: "active, two-way",
      serial: "0417",
    },
    state: "in review",
    state_detail: "12 of 27 bands",
    levels_dB: [76, 86, 96, 102],
    captured: 11,
    planned: 11,
    limits: [makeLimits()],
    max_level_dB: 103.4,
    with: { id: "5f0c2b8e-0000-4000-8000-000000000009", name: "Tomas Reith" },
    changed_at: "2026-05-12T08:42:00.000Z",
    ...change,
  };
}
