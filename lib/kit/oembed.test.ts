import { describe, expect, it } from "vitest";
import { makeSampleSnapshot } from "../../tests/support/sample-publication";
import { toAltText, toArticleSentence } from "./kit-words";
import { parsePublicationUrl, toOembed, toOembedXml } from "./oembed";

const ORIGIN = "https://tests.example";
const input = {
  title: 'Osier "8A" & more: how loud it plays',
  lab: "Reedholm Test Lab",
  origin: ORIGIN,
  card: `${ORIGIN}/t/reedholm/osier-8a/2/card`,
  picture: `${ORIGIN}/t/reedholm/osier-8a/2/og.png`,
  maxWidth: Infinity,
  maxHeight: Infinity,
};

describe("toOembed", () => {
  it.each([
    [Infinity, Infinity, 640, 360],
    [640, 360, 640, 360],
    [639, Infinity, 320, 490],
    [320, 490, 320, 490],
  ])("fits a room of %d x %d", (maxWidth, maxHeight, width, height) => {
    const answer = toOembed({ ...input, maxWidth, maxHeight });
    expect(answer).toMatchObject({ type: "rich", version: "1.0", width, height });
    expect(answer["html"]).toContain(
      `src="${ORIGIN}/t/reedholm/osier-8a/2/card" width="${width}" height="${height}"`,
    );
  });

  it("is a bare link where no card fits, and never larger than asked", () => {
    const answer = toOembed({ ...input, maxWidth: 300 });
    expect(answer).toMatchObject({ type: "link" });
    expect(answer).not.toHaveProperty("html");
    expect(answer).not.toHaveProperty("thumbnail_url");
    expect(toOembed(input)).toMatchObject({ thumbnail_width: 1200, thumbnail_height: 630 });
  });

  it("keeps marks of HTML and XML in their place", () => {
    const answer = toOembed(input);
    expect(answer["html"]).toContain('title="Osier &quot;8A&quot; &amp; more: how loud it plays"');
    const xml = toOembedXml(answer);
    expect(xml).toContain("<html>&lt;iframe src=&quot;");
    expect(xml).toContain("<title>Osier &quot;8A&quot; &amp; more");
    expect(xml.match(/<\/?oembed>/g)).toEqual(["<oembed>", "</oembed>"]);
  });
});

describe("parsePublicationUrl", () => {
  it.each([
    [`${ORIGIN}/t/reedholm/osier-8a`, { lab: "reedholm", slug: "osier-8a", revision: null }],
    [`${ORIGIN}/t/reedholm/osier-8a/`, { lab: "reedholm", slug: "osier-8a", revision: null }],
    [`${ORIGIN}/t/reedholm/osier-8a/2`, { lab: "reedholm", slug: "osier-8a", revision: "2" }],
    [`${ORIGIN}/t/reedholm/osier-8a/2/card`, { lab: "reedholm", slug: "osier-8a", revision: "2" }],
    [`${ORIGIN}/t/reedholm/osier-8a/2?x=1#y`, { lab: "reedholm", slug: "osier-8a", revision: "2" }],
    [`${ORIGIN}/published`, null],
    [`${ORIGIN}/t/reedholm/osier-8a/2/og.png`, null],
    ["https://elsewhere.example/t/reedholm/osier-8a", null],
    ["not an address", null],
  ])("%s", (url, address) => {
    expect(parsePublicationUrl(url, ORIGIN)).toEqual(address);
  });
});

describe("words for the article", () => {
  const snapshot = makeSampleSnapshot();
  it.each([
    ["the sentence", toArticleSentence(snapshot, "Europe/London")],
    ["the alt text", toAltText(snapshot)],
  ])("%s carries distance, weighting, criterion, method and notice", (_, words) => {
    for (const part of [
      "at least 101\u00a0dB at 1\u00a0m",
      "Sine sweep, one tone at a time",
      "unweighted",
      "limit: 3\u00a0dB compression",
      "not without hearing protection",
      "Osier 8A by Withy Lane",
    ]) {
      expect(words).toContain(part);
    }
  });

  it("say who measured, and when", () => {
    expect(toArticleSentence(snapshot, "Europe/London")).toContain(
      "(Reedholm Test Lab, 14 May 2026, one unit, revision 1.)",
    );
  });
});
