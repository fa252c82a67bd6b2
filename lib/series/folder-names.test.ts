import { describe, expect, it } from "vitest";
import { AppError } from "../errors/app-error";
import { toFolderNames } from "./folder-names";

const namesOf = (...paths: string[]): string[] => [...toFolderNames(paths).keys()];

describe("toFolderNames", () => {
  it.each([
    ["a flat folder", ["series.json", "76.wav"], ["series.json", "76.wav"]],
    ["a folder in an archive", ["a/series.json", "a/b/76.wav"], ["series.json", "b/76.wav"]],
    [
      "what systems leave",
      ["a/series.json", "a/.DS_Store", "__MACOSX/a/._76.wav", "a/Thumbs.db"],
      ["series.json"],
    ],
    [
      "a deeper one beside",
      ["a/series.json", "a/old/series.json"],
      ["series.json", "old/series.json"],
    ],
    ["files elsewhere", ["a/series.json", "b/76.wav"], ["series.json"]],
  ])("%s", (_what, paths, names) => {
    expect(namesOf(...paths)).toEqual(names);
  });

  it.each([
    ["none", ["76.wav"], "series.file-missing"],
    ["two", ["a/series.json", "b/series.json"], "series.file-missing"],
    ["a step up", ["series.json", "a/../../b.wav"], "series.file-name"],
    ["a root", ["series.json", "/etc/b.wav"], "series.file-name"],
    ["a drive", ["series.json", "C:/b.wav"], "series.file-name"],
    ["a backslash", ["series.json", "a\\b.wav"], "series.file-name"],
    ["the same twice", ["series.json", "a.wav", "a.wav"], "series.file-name"],
  ])("refuses %s", (_what, paths, code) => {
    try {
      toFolderNames(paths);
    } catch (error) {
      expect(error instanceof AppError && error.code).toBe(code);
      return;
    }
    throw new Error("it was taken");
  });
});
