import type { SeriesRow } from "@/lib/api/series";

/** Where somebody who picks a row wants to be: at the figures, the recordings or the plan. */
export function toRowHref(row: Pick<SeriesRow, "id" | "state">): string {
  switch (row.state) {
    case "planned":
      return `/series/${row.id}/plan`;
    case "capturing":
      return `/series/${row.id}/runs`;
    case "analysing":
    case "analysis failed":
    case "in review":
    case "signed off":
      return `/series/${row.id}/output-limit`;
  }
}
