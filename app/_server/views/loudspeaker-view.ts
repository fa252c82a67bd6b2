import type { LoudspeakerRow } from "../../../db/queries/loudspeakers";
import {
  LOUDSPEAKER_KINDS,
  type Loudspeaker,
  type LoudspeakerInput,
  type LoudspeakerChange,
} from "../../../lib/api/loudspeakers";
import { toPerson } from "./person-view";

export function toLoudspeakerView(row: LoudspeakerRow): Loudspeaker {
  return {
    id: row.id,
    maker: row.maker,
    model: row.model,
    serial: row.serial,
    kind: LOUDSPEAKER_KINDS.find((kind) => kind === row.kind) ?? "other",
    largest_dimension_m: row.largest_dimension_m,
    tuning_Hz: row.tuning_hz,
    // The digest in the address lets a browser keep the picture until it is another.
    photo_url:
      row.photo_digest === null
        ? null
        : `/api/v1/loudspeakers/${row.id}/photo?v=${row.photo_digest.slice(0, 12)}`,
    series_count: row.seriesCount,
    created_at: row.created_at.toISOString(),
    created_by: toPerson(row.created_by, row.createdByName),
    changed_at: row.changed_at.toISOString(),
  };
}

/** Names of the API to names of columns. */
export function toLoudspeakerFields({ tuning_Hz, ...rest }: LoudspeakerInput) {
  return { ...rest, tuning_hz: tuning_Hz };
}

export function toLoudspeakerChange({ tuning_Hz, ...rest }: LoudspeakerChange) {
  return tuning_Hz === undefined ? rest : { ...rest, tuning_hz: tuning_Hz };
}
