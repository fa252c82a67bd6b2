import { describe, expect, it } from "vitest";
import { z } from "zod";
import { problemSchema } from "../api/common";
import { AppError } from "../errors/app-error";
import { ERROR_TABLE } from "../errors/error-table";
import { readJson } from "./read-json";
import { toInputError, toProblem, toProblemResponse } from "./problem";

const place = { instance: "/api/v1/series", requestId: "r-1" };

describe("toProblem", () => {
  it("keeps code, title, status and words of a known error", () => {
    const error = new AppError("storage.full", "12 MB are free, 40 MB are needed.", {
      details: { freeBytes: 12e6 },
    });
    expect(toProblem(error, place)).toEqual({
      type: "urn:tidemark:problem:storage.full",
      title: ERROR_TABLE["storage.full"].title,
      status: 507,
      detail: "12 MB are free, 40 MB are needed.",
      instance: "/api/v1/series",
      code: "storage.full",
      requestId: "r-1",
      details: { freeBytes: 12e6 },
    });
  });

  it.each([
    ["an error", new Error("password for user tidemark_app failed at 10.0.0.1")],
    ["a string", "secret"],
    ["nothing", undefined],
  ])("lets nothing of %s out", (_name, error) => {
    const problem = toProblem(error, place);
    expect(problem).toMatchObject({ status: 500, code: "internal" });
    expect(JSON.stringify(problem)).not.toMatch(/password|secret|10\.0\.0\.1/);
    expect(problem.detail).toContain("r-1");
  });

  it("names the faults of an input by field", () => {
    const schema = z.strictObject({ plan: z.object({ levels: z.array(z.number()) }) });
    const parsed = schema.safeParse({ plan: { levels: [76, "x"] }, more: 1 });
    const problem = toProblem(toInputError(parsed.error), place);
    expect(problemSchema.parse(problem)).toMatchObject({ code: "request.invalid", status: 400 });
    expect(problem.errors?.map((error) => error.path)).toEqual(["plan.levels.1", ""]);
    expect(problem.details).toBeUndefined();
  });
});

describe("toProblemResponse", () => {
  it.each([
    ["auth.required", 401, "www-authenticate", 'Bearer realm="tidemark"'],
    ["auth.rate-limited", 429, "retry-after", "91"],
  ] as const)("%s carries its header", (code, status, name, value) => {
    const error = new AppError(code, "No.", { details: { retryAfterS: 90.2 } });
    const response = toProblemResponse(toProblem(error, place));
    expect(response.status).toBe(status);
    expect(response.headers.get(name)).toBe(value);
    expect(response.headers.get("content-type")).toBe("application/problem+json");
  });
});

describe("readJson", () => {
  const post = (body: string, type = "application/json"): Request =>
    new Request("http://x.test", { method: "POST", body, headers: { "content-type": type } });

  it("reads what is JSON, over any cut of its characters", async () => {
    const text = JSON.stringify({ words: "Prüfstand – 76 dB ".repeat(20) });
    const bytes = new TextEncoder().encode(text);
    const body = new ReadableStream({
      start(controller) {
        for (let at = 0; at < bytes.length; at += 7) controller.enqueue(bytes.slice(at, at + 7));
        controller.close();
      },
    });
    const request = new Request("http://x.test", {
      method: "POST",
      body,
      headers: { "content-type": "application/json; charset=utf-8" },
      duplex: "half",
    } as RequestInit);
    expect(await readJson(request)).toEqual(JSON.parse(text));
  });

  it.each([
    ["{", "application/json", "request.invalid"],
    ["", "application/json", "request.invalid"],
    ["{}", "text/plain", "request.media-type"],
    ["{}", "application/jsonp", "request.media-type"],
    [`"${"x".repeat(2000)}"`, "application/json", "request.too-large"],
  ])("refuses %s as %s", async (body, type, code) => {
    await expect(readJson(post(body, type), 1000)).rejects.toMatchObject({ code });
  });
});
