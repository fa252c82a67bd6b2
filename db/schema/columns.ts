/** Column kinds that several tables share. */
import type { ColumnType, Generated } from "kysely";

/** timestamptz with a default. */
export type Moment = ColumnType<Date, Date | string | undefined, Date | string>;
/** timestamptz that may be empty. */
export type MaybeMoment = ColumnType<
  Date | null,
  Date | string | null | undefined,
  Date | string | null
>;
/** json or jsonb: read as T, written as the text of JSON.stringify. */
export type Json<T> = ColumnType<T, string, string>;
/** The same with a default in the database. */
export type JsonWithDefault<T> = ColumnType<T, string | undefined, string>;
export type MaybeJson<T> = ColumnType<T | null, string | null | undefined, string | null>;
export type MaybeText = ColumnType<string | null, string | null | undefined, string | null>;
export type MaybeNumber = ColumnType<number | null, number | null | undefined, number | null>;
export type Id = Generated<string>;
