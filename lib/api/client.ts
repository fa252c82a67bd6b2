/**
 * The typed way from a browser (or a script) to the API: one function that knows nothing but the
 * operation it is given. Requests are same-origin and carry the session cookie.
 */
import type { z } from "zod";
import { ERROR_TABLE, type ErrorCode } from "../errors/error-table";
import { problemSchema, type Problem } from "./common";
import type { Operation } from "./operation";

/** A refusal by the server, or a connection that was lost, in the words of a problem document. */
export class ApiProblem extends Error {
  readonly problem: Problem;

  constructor(problem: Problem, cause?: unknown) {
    super(problem.detail, cause === undefined ? undefined : { cause });
    this.name = "ApiProblem";
    this.problem = problem;
  }

  get code(): string {
    return this.problem.code;
  }

  /** HTTP status; 0 where no answer came. */
  get status(): number {
    return this.problem.status;
  }

  /** Whether the same request may succeed later. */
  get retryable(): boolean {
    if (this.problem.status === 0) return true;
    const row = Object.hasOwn(ERROR_TABLE, this.problem.code)
      ? ERROR_TABLE[this.problem.code as ErrorCode]
      : undefined;
    return row?.retryable ?? this.problem.status >= 500;
  }

  /** Message for one field of the body, named as in `errors` ("plan.levels.0.level_dB"). */
  fieldMessage(path: string): string | undefined {
    return this.problem.errors?.find((error) => error.path === path)?.message;
  }
}

/** What an operation takes: only the parts that its definition names. */
export interface CallInput<Params, Query, Body> {
  params?: Params;
  query?: Query;
  body?: Body;
}

export interface CallOptions {
  signal?: AbortSignal;
  /** Where the API stands; "" (same origin) unless a script says otherwise. */
  baseUrl?: string;
  /** A token of the lab, for scripts. */
  token?: string;
  fetch?: typeof globalThis.fetch;
}

/**
 * Calls one operation and gives its parsed answer (undefined for 204).
 *
 * @throws ApiProblem with the server's problem document; with code "connection.lost" and status 0
 *   where no answer came. An abort by `signal` is thrown as the fetch gives it.
 */
export async function callApi<
  Params extends z.ZodType,
  Query extends z.ZodType,
  Body extends z.ZodType,
  Answer extends z.ZodType,
>(
  operation: Operation<Params, Query, Body, Answer>,
  input: CallInput<z.input<Params>, z.input<Query>, z.input<Body>> = {},
  options: CallOptions = {},
): Promise<z.output<Answer>> {
  const response = await requestApi(operation, input, options);
  if (operation.answer === undefined) return undefined as z.output<Answer>;
  const json: unknown = await response.json();
  return operation.answer.parse(json);
}

/**
 * The same request with the raw answer, for files and streams.
 *
 * @throws ApiProblem as callApi does
 */
export async function requestApi<
  Params extends z.ZodType,
  Query extends z.ZodType,
  Body extends z.ZodType,
  Answer extends z.ZodType,
>(
  operation: Operation<Params, Query, Body, Answer>,
  input: CallInput<z.input<Params>, z.input<Query>, z.input<Body>> = {},
  options: CallOptions = {},
): Promise<Response> {
  const path = toApiPath(operation, input.params, input.query);
  const headers = new Headers({ accept: "application/json, application/problem+json, */*" });
  if (options.token !== undefined) headers.set("authorization", `Bearer ${options.token}`);
  const body = toRequestBody(operation.bodyMediaType, input.body, headers);
  let response: Response;
  try {
    response = await (options.fetch ?? fetch)(`${options.baseUrl ?? ""}${path}`, {
      method: operation.method,
      headers,
      body,
      credentials: "same-origin",
      signal: options.signal,
    });
  } catch (error) {
    if (options.signal?.aborted === true) throw error;
    throw new ApiProblem(lostConnection(path), error);
  }
  if (!response.ok) throw await toApiProblem(response, path);
  return response;
}

/**
 * The address of an operation, for links, downloads and event streams as well.
 *
 * @param params fill the {names} of the path; each is percent-encoded.
 * @param query undefined and "" are left out.
 */
export function toApiPath(
  operation: Pick<Operation, "path">,
  params?: unknown,
  query?: unknown,
): string {
  const given = (params ?? {}) as Record<string, unknown>;
  const path = operation.path.replaceAll(/\{(\w+)\}/g, (_whole, name: string) => {
    const value = given[name];
    if (typeof value !== "string" || value === "") {
      throw new TypeError(`${operation.path} needs the parameter ${name}`);
    }
    return encodeURIComponent(value);
  });
  const search = new URLSearchParams();
  const asked = (query ?? {}) as Record<string, string | number | boolean | null | undefined>;
  for (const [name, value] of Object.entries(asked)) {
    if (value === undefined || value === null || value === "") continue;
    search.set(name, String(value));
  }
  const text = search.toString();
  return text === "" ? path : `${path}?${text}`;
}

function toRequestBody(
  mediaType: string | undefined,
  body: unknown,
  headers: Headers,
): BodyInit | undefined {
  if (body === undefined) return undefined;
  if (mediaType === undefined) {
    headers.set("content-type", "application/json");
    return JSON.stringify(body);
  }
  // A Blob brings its own type; other bodies get the operation's, unless that is a pattern.
  if (!(body instanceof Blob) && !mediaType.includes("*")) headers.set("content-type", mediaType);
  return body as BodyInit;
}

async function toApiProblem(response: Response, path: string): Promise<ApiProblem> {
  const text = await response.text();
  const parsed = problemSchema.safeParse(parseJson(text));
  if (parsed.success) return new ApiProblem(parsed.data);
  return new ApiProblem({
    type: "about:blank",
    title: "Unexpected answer",
    status: response.status,
    detail: `The server answered ${response.status} without saying why. Try again; if it stays so, tell the admin of your lab.`,
    instance: path,
    code: "internal",
    requestId: response.headers.get("x-request-id") ?? "",
  });
}

function parseJson(text: string): unknown {
  try {
    return JSON.parse(text) as unknown;
  } catch {
    return undefined;
  }
}

const lostConnection = (path: string): Problem => ({
  type: "about:blank",
  title: "No connection",
  status: 0,
  detail: "The server cannot be reached. Check the connection; nothing that was saved is lost.",
  instance: path,
  code: "connection.lost",
  requestId: "",
});
