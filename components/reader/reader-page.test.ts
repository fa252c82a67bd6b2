import { readFileSync } from "node:fs";
import { gzipSync } from "node:zlib";
import { describe, expect, it } from "vitest";
import { COLOURS } from "@/lib/charts/tokens";
import { html } from "@/lib/html/html";
import { makeSampleSnapshot } from "@/tests/support/sample-publication";
import type { Units } from "@/lib/reader/units";
import { toReaderPage } from "./frame";
import { toPublicationBody } from "./publication-page";

const draw = (change: Parameters<typeof makeSampleSnapshot>[0] = {}, units: Units = "m"): string =>
  toReaderPage({
    title: "T",
    description: "D",
    script: true,
    body: toPublicationBody({
      snapshot: makeSampleSnapshot(change),
      digest: "f".repeat(64),
      timeZone: "UTC",
      units,
      banner: false,
      after: false,
    }),
    footer: "",
  });

describe("the public page", () => {
  it("holds answer, notice and seat without any script, in under 60 kB packed", () => {
    const text = draw();
    expect(text).toContain("at least 101");
    expect(text).toContain("WARNING");
    expect(text).toContain("about 89");
    expect(text).toContain("3.0\u00a0m (9.8\u00a0ft)");
    expect(text.match(/<script src=/g)).toHaveLength(1);
    expect(gzipSync(text).length).toBeLessThan(60_000);
  });

  it("says distances in feet first where the address asks for it, and leads back", () => {
    const text = draw({}, "ft");
    expect(text).toContain("9.8\u00a0ft (3.0\u00a0m)");
    expect(text).toContain("level at 3.3\u00a0ft (1\u00a0m)");
    expect(text).toContain(">distance, ft</text>");
    expect(text).toContain('data-units="ft"');
    expect(text).toContain('href="?units=m#seat"');
    expect(text).not.toContain("(9.8\u00a0ft)");
    expect(draw()).toContain('href="?units=ft#seat"');
  });

  it("escapes whatever people wrote", () => {
    const text = draw({
      words: '<script>alert("1")</script>',
      supplied_by: "</dd><img src=x onerror=alert(1)>",
      maker_statement: { name: "A & B", words: "x < y" },
    });
    expect(text).not.toContain("<script>alert");
    expect(text).not.toContain("<img");
    expect(text).toContain("A &amp; B");
    expect(text).toContain("x &lt; y");
  });

  it("gives every pattern of its figures an id of its own", () => {
    const ids = [...draw().matchAll(/ id="([^"]+)"/g)].map((found) => found[1]);
    expect(new Set(ids).size).toBe(ids.length);
  });

  it("shares its colours with the figures", () => {
    const css = readFileSync("public/reader.css", "utf8").toLowerCase();
    const names = ["page", "sheet", "wash", "ink", "rule", "edge", "overprint", "fault"] as const;
    for (const name of names) {
      const { light, dark } = COLOURS[name];
      expect(css).toContain(`--${name}: light-dark(${light}, ${dark})`.toLowerCase());
    }
  });
});

describe("html", () => {
  it("escapes text, keeps Html, joins lists and drops nothing-values", () => {
    expect(html`<p title="${'"'}">${["<", html`<b>${1}</b>`, null, false]}</p>`.text).toBe(
      '<p title="&quot;">&lt;<b>1</b></p>',
    );
  });
});
