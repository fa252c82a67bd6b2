import { describe, expect, it } from "vitest";
import { seriesQuerySchema } from "@/lib/api/series";
import { loadListView, toFilterWords, toListQuery, toSort } from "./list-address";

describe("the address of the list", () => {
  it("asks for everything, newest first, where it says nothing", () => {
    expect(toListQuery(loadListView(""))).toEqual({
      search: "",
      archived: "no",
      sort: "changed",
      direction: "down",
      page: 1,
      page_size: 25,
    });
  });

  it.each([
    "?state=in+review&sort=reached&direction=up&page=3&search=osier",
    "?state=nonsense&sort=colour&direction=left&page=-7&loudspeaker=1",
    `?search=${"x".repeat(400)}&page=99999999`,
  ])("is always a valid question: %s", (address) => {
    const query = toListQuery(loadListView(address));
    expect(seriesQuerySchema.safeParse(query).error).toBeUndefined();
  });

  it("says which filters hide rows", () => {
    const view = loadListView("?state=in+review&archived=yes&search=osier");
    expect(toFilterWords(view)).toEqual(["in review", "archived"]);
  });
});

describe("toSort", () => {
  it.each([
    ["changed", "down", "changed", "up"],
    ["changed", "up", "changed", "down"],
    ["changed", "down", "name", "up"],
    ["name", "up", "reached", "down"],
  ] as const)("from %s %s to %s gives %s", (sort, direction, next, expected) => {
    expect(toSort({ sort, direction }, next)).toEqual({ sort: next, direction: expected, page: 1 });
  });
});
