import { describe, expect, it } from "vitest";
import { compareQuerySchema } from "@/lib/api/compare";
import {
  loadCompareView,
  toChosenIds,
  toCompareHref,
  toCompareQuery,
  toggleChosen,
  toReferenceFirst,
} from "./compare-address";

const id = (n: number): string => `5f0c2b8e-0000-4000-8000-00000000000${n}`;

describe("the address of a comparison", () => {
  it.each([
    `?series=${id(1)},${id(2)}&thd=10&compression=off&runs=long-term`,
    `?series=${id(1)},${id(1)},osier,${id(2)},${id(3)},${id(4)},${id(5)}`,
    `?series=${id(1)}&thd=${"9".repeat(80)}&runs=sideways`,
  ])("asks a valid question: %s", (address) => {
    const query = toCompareQuery(loadCompareView(address));
    expect(compareQuerySchema.safeParse(query).error).toBeUndefined();
  });

  it("asks nothing where nothing is chosen", () => {
    expect(toCompareQuery(loadCompareView("?series=osier"))).toBeNull();
  });

  it("keeps four, each once, in order", () => {
    const many = [3, 1, 3, 2, 5, 4].map(id);
    expect(toChosenIds(many)).toEqual([3, 1, 2, 5].map(id));
  });

  it("comes back as it was sent, with another reference first", () => {
    const series = toReferenceFirst([1, 2, 3].map(id), id(3));
    expect(series).toEqual([3, 1, 2].map(id));
    const sent = toCompareHref(series);
    expect(loadCompareView(sent.slice(sent.indexOf("?"))).series).toEqual(series);
  });

  it("takes a fifth only after one has left", () => {
    const four = [1, 2, 3, 4].map(id);
    expect(toggleChosen(four, id(5))).toEqual(four);
    expect(toggleChosen(toggleChosen(four, id(2)), id(5))).toEqual([1, 3, 4, 5].map(id));
  });
});
