import { describe, expect, it } from "vitest";
import { checkOrigin, toSafePath } from "./origin";

describe("toSafePath", () => {
  it.each([
    ["/series", "/series"],
    ["/series?state=planned&page=2", "/series?state=planned&page=2"],
    ["/series#wall", "/series"],
    ["/a/../b", "/b"],
    ["//evil.test/x", "/"],
    ["/\\evil.test", "/"],
    ["/\t/evil.test", "/"],
    ["https://evil.test/", "/"],
    ["javascript:alert(1)", "/"],
    ["series", "/"],
    ["", "/"],
    [null, "/"],
    [undefined, "/"],
  ])("of %j is %j", (wish, path) => {
    expect(toSafePath(wish)).toBe(path);
  });

  it("never gives what a browser reads as another host", () => {
    for (const start of ["/", "//", "/\\", "\\", "/ /", "/\n/", "/\r\\"]) {
      const path = toSafePath(`${start}evil.test/a`);
      expect(new URL(path, "http://lab.test").host).toBe("lab.test");
    }
  });
});

describe("checkOrigin", () => {
  const outcome = (method: string, headers: Record<string, string>): string => {
    try {
      checkOrigin({ method, headers: new Headers(headers) }, "https://bench.test");
      return "taken";
    } catch (error) {
      return (error as { code: string }).code;
    }
  };

  it.each([
    ["GET", {}, "taken"],
    ["HEAD", { origin: "https://evil.test" }, "taken"],
    ["POST", { origin: "https://bench.test" }, "taken"],
    ["POST", { origin: "http://127.0.0.1:4300", host: "127.0.0.1:4300" }, "taken"],
    ["POST", {}, "request.origin"],
    ["POST", { origin: "null" }, "request.origin"],
    ["DELETE", { origin: "https://evil.test", host: "bench.test" }, "request.origin"],
    ["PUT", { origin: "https://bench.test.evil.test" }, "request.origin"],
    ["PATCH", { origin: "https://bench.test:444" }, "request.origin"],
  ])("%s with %j: %s", (method, headers, expected) => {
    expect(outcome(method, headers as Record<string, string>)).toBe(expected);
  });
});
