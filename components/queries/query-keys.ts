/** Every key of the browser's cache, once: what a fetch is stored under and what an act makes stale. */
import type { z } from "zod";
import type { compareQuerySchema } from "@/lib/api/compare";
import type { seriesQuerySchema } from "@/lib/api/series";
import type { TrailAbout } from "@/lib/labs/trail-about";

export type SeriesListQuery = z.input<typeof seriesQuerySchema>;

export const queryKeys = {
  /** Every page of the list; an act on a series makes them all stale. */
  seriesLists: ["series-list"],
  seriesList: (query: SeriesListQuery) => ["series-list", query],
  comparison: (query: z.input<typeof compareQuerySchema>) => ["series-list", "comparison", query],
  series: (seriesId: string) => ["series", seriesId],
  runs: (seriesId: string) => ["series", seriesId, "runs"],
  history: (seriesId: string) => ["series", seriesId, "history"],
  review: (seriesId: string, analysisId: string) => ["series", seriesId, "review", analysisId],
  changes: (analysisId: string, againstId: string) => ["changes", analysisId, againstId],
  analyses: (seriesId: string) => ["series", seriesId, "analyses"],
  engineChanges: ["engine-changes"],
  publications: (seriesId: string) => ["series", seriesId, "publications"],
  summaryKit: (seriesId: string, publicationId: string) => [
    "series",
    seriesId,
    "summary-kit",
    publicationId,
  ],
  draft: (seriesId: string) => ["series", seriesId, "draft"],
  previews: (seriesId: string) => ["series", seriesId, "previews"],
  loudspeakers: ["loudspeakers"],
  loudspeakerList: (search: string) => ["loudspeakers", "list", search],
  loudspeaker: (loudspeakerId: string) => ["loudspeakers", loudspeakerId],
  members: ["members"],
  invitations: ["invitations"],
  tokens: ["tokens"],
  lab: ["lab"],
  keeping: ["keeping"],
  trail: (about: TrailAbout | null) => ["trail", about],
  sessions: ["sessions"],
  notices: ["notices"],
} as const;
