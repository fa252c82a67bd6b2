/**
 * One operation of the API: what it takes, what it answers, who may call it. Handlers, the client,
 * the OpenAPI document and the tests all read this; nothing about a route is typed twice.
 */
import type { z } from "zod";
import type { ErrorCode } from "../errors/error-table";
import type { Capability } from "../roles/roles";

/** `anyone` needs no account; `account` needs a signed-in account but no role in the lab. */
export type Access = Capability | "anyone" | "account";

export interface Operation<
  Params extends z.ZodType = z.ZodType,
  Query extends z.ZodType = z.ZodType,
  Body extends z.ZodType = z.ZodType,
  Answer extends z.ZodType = z.ZodType,
> {
  id: string;
  method: "GET" | "POST" | "PATCH" | "PUT" | "DELETE";
  /** As in OpenAPI: /api/v1/series/{seriesId} */
  path: string;
  summary: string;
  access: Access;
  params?: Params;
  query?: Query;
  body?: Body;
  /** A body that is not JSON, for example "image/*". */
  bodyMediaType?: string;
  status: number;
  /** JSON answer; left out for 204 and for files. */
  answer?: Answer;
  /** An answer that is not JSON, for example "audio/wav" or "text/event-stream". */
  answerMediaType?: string;
  /** The file may be asked for in part, by the header Range. */
  ranged?: boolean;
  /** Codes beyond those that every operation of its access may answer. */
  errors: readonly ErrorCode[];
}

export function defineOperation<
  Params extends z.ZodType = z.ZodType<unknown>,
  Query extends z.ZodType = z.ZodType<unknown>,
  Body extends z.ZodType = z.ZodType<unknown>,
  Answer extends z.ZodType = z.ZodType<unknown>,
>(operation: Operation<Params, Query, Body, Answer>): Operation<Params, Query, Body, Answer> {
  return operation;
}
