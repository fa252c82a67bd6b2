import { describe, expect, it } from "vitest";
import { wrapText } from "./text-lines";

describe("wrapText", () => {
  const measure = (text: string): number => text.length;
  it.each([
    ["a bb ccc", 4, ["a bb", "ccc"]],
    ["a 93\u00a0dB b", 4, ["a", "93\u00a0dB", "b"]],
    ["longerthanroom a", 5, ["longerthanroom", "a"]],
    ["", 5, []],
    ["  spaced   out ", 20, ["spaced out"]],
  ])("%j in %d", (text, room, lines) => {
    expect(wrapText(text, room, measure)).toEqual(lines);
  });
});
