/** The OpenAPI 3.1 document, made from the operations and their zod schemas: nothing is typed twice. */
import { z } from "zod";
import { ERROR_TABLE, type ErrorCode } from "../errors/error-table";
import { problemSchema } from "./common";
import type { Access, Operation } from "./operation";
import { OPERATION_GROUPS } from "./operations";
import { toTusPaths } from "./openapi-tus";

export type JsonObject = Record<string, unknown>;

const PROBLEM_TYPE = "application/problem+json";
const PROBLEM = { $ref: "#/components/schemas/Problem" };

/** Codes that any operation of an access may answer. */
const COMMON_ERRORS: readonly ErrorCode[] = ["internal", "database.unavailable"];
const SIGNED_IN_ERRORS: readonly ErrorCode[] = [
  "auth.required",
  "auth.token-invalid",
  "auth.session-needed",
];
const QUERY_ERRORS: readonly ErrorCode[] = ["request.invalid"];
const BODY_ERRORS: readonly ErrorCode[] = [
  "request.invalid",
  "request.media-type",
  "request.too-large",
];

/**
 * @param place.publicUrl address of this installation, without a slash at the end.
 * @param place.cookie name of its session cookie.
 */
export function toOpenApi({
  publicUrl,
  cookie,
}: {
  publicUrl: string;
  cookie: string;
}): JsonObject {
  const paths: Record<string, JsonObject> = {};
  for (const [tag, operations] of Object.entries(OPERATION_GROUPS)) {
    for (const operation of operations) {
      const path = (paths[operation.path] ??= {});
      path[operation.method.toLowerCase()] = toOperationObject(tag, operation);
    }
  }
  return {
    openapi: "3.1.1",
    info: {
      title: "Tidemark",
      version: "1",
      description:
        "Everything that a member of a lab can do, for scripts. Send a token of the lab as `Authorization: Bearer tdm_…`. Errors are RFC 9457 problem documents with a stable `code`.",
    },
    servers: [{ url: publicUrl }],
    tags: [...Object.keys(OPERATION_GROUPS), "Uploads"].map((name) => ({ name })),
    paths: { ...paths, ...toTusPaths(toProblems) },
    components: {
      schemas: { Problem: toSchema(problemSchema, "output") },
      securitySchemes: {
        token: { type: "http", scheme: "bearer", description: "A token of the lab." },
        session: { type: "apiKey", in: "cookie", name: cookie },
      },
    },
  };
}

/** The schema of what an operation answers, for tests that validate answers. null: no JSON. */
export function toAnswerSchema(operation: Operation): JsonObject | null {
  return operation.answer === undefined ? null : toSchema(operation.answer, "output");
}

function toOperationObject(tag: string, operation: Operation): JsonObject {
  const parameters = [
    ...toParameters(operation.params, "path"),
    ...toParameters(operation.query, "query"),
    ...(operation.ranged === true ? [RANGE] : []),
  ];
  const body = toRequestBody(operation);
  return {
    operationId: operation.id,
    tags: [tag],
    summary: operation.summary,
    description: toAccessWords(operation.access),
    ...(parameters.length === 0 ? {} : { parameters }),
    ...(body === null ? {} : { requestBody: body }),
    responses: {
      [operation.status]: toAnswer(operation),
      ...(operation.ranged === true ? toRangeAnswers(operation) : {}),
      ...toProblems(listErrors(operation)),
    },
    security: operation.access === "anyone" ? [] : [{ token: [] }, { session: [] }],
  };
}

function toAccessWords(access: Access): string {
  if (access === "anyone") return "Needs no account.";
  if (access === "account") return "Needs an account, in whatever role.";
  return `Needs the right to ${access === "see" ? "see the lab" : access}.`;
}

function toRequestBody({ body, bodyMediaType }: Operation): JsonObject | null {
  if (bodyMediaType !== undefined) return { required: true, content: { [bodyMediaType]: {} } };
  if (body === undefined) return null;
  return { required: true, content: { "application/json": { schema: toSchema(body, "input") } } };
}

function toAnswer(operation: Operation): JsonObject {
  const description = operation.summary;
  if (operation.answerMediaType !== undefined) {
    return { description, content: { [operation.answerMediaType]: {} } };
  }
  const schema = toAnswerSchema(operation);
  return schema === null
    ? { description }
    : { description, content: { "application/json": { schema } } };
}

const RANGE = {
  name: "Range",
  in: "header",
  required: false,
  description: "One stretch of bytes, such as bytes=0-999; several are answered as the whole.",
  schema: { type: "string" },
};
const CONTENT_RANGE = {
  "Content-Range": {
    description: "The bytes of this answer and the size of the whole.",
    schema: { type: "string" },
  },
};

function toRangeAnswers(operation: Operation): Record<string, JsonObject> {
  return {
    206: { ...toAnswer(operation), description: "The range asked for.", headers: CONTENT_RANGE },
    416: { description: "The range begins behind the end.", headers: CONTENT_RANGE },
  };
}

/** Every code that the operation may answer, its own and those of its access. */
export function listErrors(operation: Operation): ErrorCode[] {
  const isWrite = operation.method !== "GET";
  return [
    ...new Set([
      ...operation.errors,
      ...(operation.query === undefined ? [] : QUERY_ERRORS),
      ...(operation.body === undefined ? [] : BODY_ERRORS),
      ...(operation.params === undefined ? [] : (["not-found"] as const)),
      ...(operation.access === "anyone" ? [] : SIGNED_IN_ERRORS),
      ...(isWrite ? (["request.origin"] as const) : []),
      ...(operation.access === "anyone" || operation.access === "account"
        ? []
        : (["auth.forbidden"] as const)),
      ...COMMON_ERRORS,
    ]),
  ];
}

/** One answer per status, with the codes that it stands for. */
function toProblems(codes: readonly ErrorCode[]): Record<string, JsonObject> {
  const byStatus = new Map<number, ErrorCode[]>();
  for (const code of codes) {
    const { status } = ERROR_TABLE[code];
    byStatus.set(status, [...(byStatus.get(status) ?? []), code]);
  }
  return Object.fromEntries(
    [...byStatus]
      .sort(([a], [b]) => a - b)
      .map(([status, ofStatus]) => [
        String(status),
        {
          description: ofStatus.map((code) => `\`${code}\`: ${ERROR_TABLE[code].title}.`).join(" "),
          content: { [PROBLEM_TYPE]: { schema: PROBLEM } },
        },
      ]),
  );
}

function toParameters(schema: z.ZodType | undefined, place: "path" | "query"): JsonObject[] {
  if (schema === undefined) return [];
  const { properties = {}, required = [] } = parametersSchema.parse(toSchema(schema, "input"));
  return Object.entries(properties).map(([name, property]) => ({
    name,
    in: place,
    required: place === "path" || required.includes(name),
    schema: property,
  }));
}

const parametersSchema = z.object({
  properties: z.record(z.string(), z.unknown()).optional(),
  required: z.array(z.string()).optional(),
});

/** JSON Schema 2020-12, which is what OpenAPI 3.1 speaks. */
function toSchema(schema: z.ZodType, io: "input" | "output"): JsonObject {
  const { $schema: _dialect, ...rest } = z.toJSONSchema(schema, {
    io,
    target: "draft-2020-12",
    unrepresentable: "any",
  });
  return rest;
}
