import { describe, expect, it } from "vitest";
import { toContentSecurityPolicy } from "./content-security";

const directive = (policy: string, name: string): string[] =>
  policy
    .split("; ")
    .find((part) => part.startsWith(`${name} `))
    ?.split(" ")
    .slice(1) ?? [];

describe("toContentSecurityPolicy", () => {
  it("lets no script in without the nonce", () => {
    const policy = toContentSecurityPolicy("abc", false);
    expect(directive(policy, "script-src")).toEqual(["'self'", "'nonce-abc'", "'strict-dynamic'"]);
    expect(directive(policy, "frame-ancestors")).toEqual(["'none'"]);
    expect(directive(policy, "connect-src")).toEqual(["'self'"]);
  });

  it("evaluates code in development alone", () => {
    expect(directive(toContentSecurityPolicy("a", true), "script-src")).toContain("'unsafe-eval'");
  });
});
