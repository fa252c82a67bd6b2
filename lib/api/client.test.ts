import { describe, expect, it } from "vitest";
import { z } from "zod";
import { ApiProblem, callApi, requestApi, toApiPath } from "./client";
import { defineOperation } from "./operation";

const operation = defineOperation({
  id: "measure",
  method: "POST",
  path: "/api/v1/things/{thingId}/measures",
  summary: "A made-up operation",
  access: "capture",
  params: z.strictObject({ thingId: z.string() }),
  query: z.strictObject({ page: z.coerce.number().default(1), search: z.string().optional() }),
  body: z.strictObject({ level_dB: z.number() }),
  status: 200,
  answer: z.object({ level_dB: z.number() }),
  errors: [],
});

const answering =
  (response: () => Response, seen: Request[] = []): typeof fetch =>
  (input, init) => {
    const path = input instanceof Request ? input.url : input;
    seen.push(new Request(new URL(path, "http://lab.test"), init));
    return Promise.resolve(response());
  };

describe("toApiPath", () => {
  it.each([
    ["a b/c", undefined, "/api/v1/things/a%20b%2Fc/measures"],
    ["x", { page: 2, search: "" }, "/api/v1/things/x/measures?page=2"],
    ["x", { search: "8 A&B" }, "/api/v1/things/x/measures?search=8+A%26B"],
  ])("fills %s with %o", (thingId, query, path) => {
    expect(toApiPath(operation, { thingId }, query)).toBe(path);
  });

  it("names a missing parameter", () => {
    expect(() => toApiPath(operation, {})).toThrow(/thingId/);
  });
});

describe("callApi", () => {
  const input = { params: { thingId: "x" }, body: { level_dB: 76 } };

  it("sends JSON and gives the parsed answer", async () => {
    const seen: Request[] = [];
    const fetching = answering(() => Response.json({ level_dB: 75.9, more: true }), seen);
    const answer = await callApi(operation, input, { fetch: fetching, token: "tdm_secret" });
    expect(answer).toEqual({ level_dB: 75.9 });
    expect(seen[0]?.method).toBe("POST");
    expect(seen[0]?.headers.get("content-type")).toBe("application/json");
    expect(seen[0]?.headers.get("authorization")).toBe("Bearer tdm_secret");
    expect(await seen[0]?.json()).toEqual({ level_dB: 76 });
  });

  it("throws the server's problem with its code and fields", async () => {
    const problem = {
      type: "about:blank",
      title: "The request does not fit its schema",
      status: 400,
      detail: "level_dB must be a number.",
      instance: "/api/v1/things/x/measures",
      code: "request.invalid",
      requestId: "r1",
      errors: [{ path: "level_dB", message: "must be a number" }],
    };
    const fetching = answering(() => Response.json(problem, { status: 400 }));
    const error = await callApi(operation, input, { fetch: fetching }).catch((e: unknown) => e);
    expect(error).toBeInstanceOf(ApiProblem);
    expect(error).toMatchObject({ code: "request.invalid", status: 400, retryable: false });
    expect((error as ApiProblem).fieldMessage("level_dB")).toBe("must be a number");
    expect((error as ApiProblem).fieldMessage("other")).toBeUndefined();
  });

  it("says so where the answer is no problem document", async () => {
    const fetching = answering(() => new Response("<html>", { status: 502 }));
    const error = await callApi(operation, input, { fetch: fetching }).catch((e: unknown) => e);
    expect(error).toMatchObject({ code: "internal", status: 502, retryable: true });
  });

  it("tells a lost connection from a refusal", async () => {
    const fetching: typeof fetch = () => Promise.reject(new TypeError("fetch failed"));
    const error = await callApi(operation, input, { fetch: fetching }).catch((e: unknown) => e);
    expect(error).toMatchObject({ code: "connection.lost", status: 0, retryable: true });
  });

  it("hands an abort on as it is", async () => {
    const controller = new AbortController();
    controller.abort(new Error("left the page"));
    const fetching: typeof fetch = (_input, init) => Promise.reject(init?.signal?.reason as Error);
    await expect(
      callApi(operation, input, { fetch: fetching, signal: controller.signal }),
    ).rejects.toThrow("left the page");
  });

  it("gives undefined where the operation answers nothing", async () => {
    const removing = { ...operation, answer: undefined, body: undefined };
    const fetching = answering(() => new Response(null, { status: 204 }));
    const response = await requestApi(removing, { params: { thingId: "x" } }, { fetch: fetching });
    expect(response.status).toBe(204);
    await expect(
      callApi(removing, { params: { thingId: "x" } }, { fetch: fetching }),
    ).resolves.toBeUndefined();
  });
});
