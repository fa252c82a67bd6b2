import Ajv2020 from "ajv/dist/2020";
import addFormats from "ajv-formats";
import { describe, expect, it } from "vitest";
import { OPERATIONS } from "./operations";
import { toAnswerSchema, toOpenApi } from "./openapi";

const document = toOpenApi({ publicUrl: "https://tidemark.example", cookie: "session-4300" });

describe("the OpenAPI document", () => {
  it("is plain JSON and names every operation once", () => {
    expect(JSON.parse(JSON.stringify(document))).toEqual(document);
    const ids = OPERATIONS.map((operation) => operation.id);
    expect(new Set(ids).size).toBe(ids.length);
    const text = JSON.stringify(document);
    for (const id of ids) expect(text).toContain(`"operationId":"${id}"`);
  });

  it("names place and cookie of this installation", () => {
    expect(document).toMatchObject({
      servers: [{ url: "https://tidemark.example" }],
      components: { securitySchemes: { session: { in: "cookie", name: "session-4300" } } },
    });
  });

  it("names every parameter of every path", () => {
    for (const { id, path, params } of OPERATIONS) {
      const named = [...path.matchAll(/\{(\w+)\}/g)].map((found) => found[1]);
      const shape: unknown = params === undefined ? {} : Reflect.get(params, "shape");
      expect([id, Object.keys(shape ?? {})]).toEqual([id, named]);
    }
  });

  it("says that a recording may be asked for in part", () => {
    expect(document).toMatchObject({
      paths: {
        "/api/v1/runs/{runId}/file": {
          get: {
            parameters: [{ name: "runId" }, { name: "Range", in: "header", required: false }],
            responses: {
              200: { content: { "application/octet-stream": {} } },
              206: { headers: { "Content-Range": {} } },
              416: { headers: { "Content-Range": {} } },
            },
          },
        },
      },
    });
  });

  it("has answers that a validator takes", () => {
    const ajv = addFormats(new Ajv2020({ strict: false }));
    for (const operation of OPERATIONS) {
      const schema = toAnswerSchema(operation);
      expect([operation.id, schema === null || ajv.validateSchema(schema)]).toEqual([
        operation.id,
        true,
      ]);
    }
  });

  it("refuses an answer that lacks what it promises", () => {
    const operation = OPERATIONS.find((one) => one.id === "getLoudspeaker");
    const schema = operation === undefined ? null : toAnswerSchema(operation);
    const validate = addFormats(new Ajv2020({ strict: false })).compile(schema ?? {});
    expect(validate({ id: "x" })).toBe(false);
  });
});
