/**
 * The one wrapper of every handler under /api/v1: who is calling, may they, does the input fit its
 * schema; then the handler; then one answer, or one problem document.
 *
 *     export const GET = handle(getSeries, ({ params, inLab }) =>
 *       inLab((trx) => toSeriesView(trx, params.seriesId)));
 */
import { randomUUID } from "node:crypto";
import type { z } from "zod";
import { inLab, type LabScope } from "../../db/in-lab";
import type { Trx } from "../../db/client";
import type { Operation } from "../../lib/api/operation";
import { getEnvironment } from "../../lib/config/environment";
import { AppError } from "../../lib/errors/app-error";
import { checkOrigin } from "../../lib/http/origin";
import { isExplained, toInputError, toProblem, toProblemResponse } from "../../lib/http/problem";
import { readJson } from "../../lib/http/read-json";
import {
  type Caller,
  checkCapability,
  findCaller,
  type LabCaller,
  signInFirst,
  toScope,
} from "./caller";
import { getDatabase } from "./database";
import { log } from "./log";

/** What Next.js hands to a route handler. */
export interface RouteArguments {
  params: Promise<Record<string, string | string[] | undefined>>;
}
export type RouteHandler = (request: Request, route: RouteArguments) => Promise<Response>;

type Schema = z.ZodType;

export interface Call<P extends Schema, Q extends Schema, B extends Schema> {
  request: Request;
  requestId: string;
  params: z.output<P>;
  query: z.output<Q>;
  /** undefined unless the operation names a JSON body. */
  body: z.output<B>;
}

export interface LabCall<P extends Schema, Q extends Schema, B extends Schema> extends Call<
  P,
  Q,
  B
> {
  caller: LabCaller;
  /** Lab, account and token: for the trail. */
  scope: LabScope;
  /** A transaction that sees the caller's lab. */
  inLab: <T>(act: (trx: Trx) => Promise<T>) => Promise<T>;
}

export interface AccountCall<P extends Schema, Q extends Schema, B extends Schema> extends Call<
  P,
  Q,
  B
> {
  caller: Caller;
}

/** A value for the answer's schema, or a whole response where the answer is no JSON. */
type Answered<A extends Schema> = Promise<z.input<A> | Response>;

/** For operations whose access is a capability in the lab. */
export function handle<P extends Schema, Q extends Schema, B extends Schema, A extends Schema>(
  operation: Operation<P, Q, B, A>,
  act: (call: LabCall<P, Q, B>) => Answered<A>,
): RouteHandler {
  const { access } = operation;
  if (access === "anyone" || access === "account") throw wrongWrapper(operation, "handle");
  return wrap(operation, async (request, route, requestId) => {
    const caller = checkCapability(await findCaller(getDatabase(), request.headers), access);
    checkCookieWrite(request, caller);
    const scope = toScope(caller);
    const input = await parseInput(operation, request, route);
    return act({
      ...input,
      request,
      requestId,
      caller,
      scope,
      inLab: (run) => inLab(getDatabase(), scope, run),
    });
  });
}

/** For operations of an account, in whatever lab. */
export function handleAccount<
  P extends Schema,
  Q extends Schema,
  B extends Schema,
  A extends Schema,
>(
  operation: Operation<P, Q, B, A>,
  act: (call: AccountCall<P, Q, B>) => Answered<A>,
): RouteHandler {
  if (operation.access !== "account") throw wrongWrapper(operation, "handleAccount");
  return wrap(operation, async (request, route, requestId) => {
    const caller = await findCaller(getDatabase(), request.headers);
    if (caller === null) throw signInFirst();
    checkCookieWrite(request, caller);
    return act({ ...(await parseInput(operation, request, route)), request, requestId, caller });
  });
}

/** For operations that need no account. Writes come from our own pages or from scripts without cookies. */
export function handleAnyone<
  P extends Schema,
  Q extends Schema,
  B extends Schema,
  A extends Schema,
>(operation: Operation<P, Q, B, A>, act: (call: Call<P, Q, B>) => Answered<A>): RouteHandler {
  if (operation.access !== "anyone") throw wrongWrapper(operation, "handleAnyone");
  return wrap(operation, async (request, route, requestId) => {
    if (request.headers.has("origin")) checkOrigin(request, getEnvironment().publicUrl);
    return act({ ...(await parseInput(operation, request, route)), request, requestId });
  });
}

/** Any error as one problem document; what nobody explained goes to the log with its cause. */
export function answerError(error: unknown, request: Request, requestId: string): Response {
  const instance = new URL(request.url).pathname;
  if (!isExplained(error)) {
    log().error({ err: error, requestId, method: request.method, instance }, "request failed");
  }
  return toProblemResponse(toProblem(error, { instance, requestId }));
}

/** The id that log and answer share: the one of a proxy in front, or a new one. */
export function toRequestId(headers: Headers): string {
  const given = headers.get("x-request-id");
  return given !== null && /^[\w-]{8,64}$/.test(given) ? given : randomUUID();
}

/** @throws AppError "request.origin" */
export function checkCookieWrite(request: Request, caller: Caller): void {
  if (caller.tokenId === null) checkOrigin(request, getEnvironment().publicUrl);
}

function wrap<P extends Schema, Q extends Schema, B extends Schema, A extends Schema>(
  operation: Operation<P, Q, B, A>,
  act: (request: Request, route: RouteArguments, requestId: string) => Answered<A>,
): RouteHandler {
  return async (request, route) => {
    const requestId = toRequestId(request.headers);
    try {
      const answer = await act(request, route, requestId);
      return toResponse(operation, answer, requestId);
    } catch (error) {
      return answerError(error, request, requestId);
    }
  };
}

function toResponse(operation: Operation, answer: unknown, requestId: string): Response {
  const response =
    answer instanceof Response
      ? answer
      : new Response(
          operation.answer === undefined ? null : JSON.stringify(operation.answer.parse(answer)),
          {
            status: operation.status,
            headers: operation.answer === undefined ? {} : { "content-type": "application/json" },
          },
        );
  if (!response.headers.has("cache-control")) response.headers.set("cache-control", "no-store");
  response.headers.set("x-request-id", requestId);
  response.headers.set("x-content-type-options", "nosniff");
  return response;
}

async function parseInput<P extends Schema, Q extends Schema, B extends Schema>(
  operation: Operation<P, Q, B>,
  request: Request,
  route: RouteArguments,
): Promise<{ params: z.output<P>; query: z.output<Q>; body: z.output<B> }> {
  const params = operation.params?.safeParse(await route.params);
  if (params !== undefined && !params.success) {
    throw new AppError("not-found", "There is nothing at this address.", { cause: params.error });
  }
  try {
    const query = operation.query?.parse(Object.fromEntries(new URL(request.url).searchParams));
    const takesJson = operation.body !== undefined && operation.bodyMediaType === undefined;
    const body = takesJson ? operation.body?.parse(await readJson(request)) : undefined;
    // A part without a schema is undefined, and its type unknown.
    // oxlint-disable-next-line typescript/no-unsafe-type-assertion
    return { params: params?.data, query, body } as {
      params: z.output<P>;
      query: z.output<Q>;
      body: z.output<B>;
    };
  } catch (error) {
    throw toInputError(error);
  }
}

function wrongWrapper(operation: Pick<Operation, "id" | "access">, wrapper: string): Error {
  return new Error(`${operation.id} has access ${operation.access}: not for ${wrapper}`);
}
