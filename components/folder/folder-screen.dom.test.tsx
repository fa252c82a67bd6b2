// @vitest-environment happy-dom
import { QueryClientProvider } from "@tanstack/react-query";
import { AppRouterContext } from "next/dist/shared/lib/app-router-context.shared-runtime";
import { act } from "react";
import { createRoot, type Root } from "react-dom/client";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { makeQueryClient } from "../queries/query-provider";
import { FolderScreen } from "./folder-screen";

const SERIES = {
  loudspeaker: "Withy Lane Osier 5A",
  environment: "anechoic",
  distance_m: 1,
  stimulus: { start_Hz: 20, stop_Hz: 20_000, length_s: 2, rate_Hz: 48_000 },
  calibration: { full_scale_dB: 124 },
  runs: [
    { file: "76.wav", level_dB: 76 },
    { file: "86.wav", level_dB: 86 },
  ],
};

let root: Root;
let page: HTMLElement;
/** What was asked of the server, which stands outside. */
let asked: { path: string; body: unknown }[];

beforeEach(async () => {
  asked = [];
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  Reflect.set(globalThis, "fetch", (path: string, init: { method: string; body?: string }) => {
    if (init.method === "GET") {
      return Promise.resolve(Response.json({ loudspeakers: [] }));
    }
    asked.push({ path, body: JSON.parse(init.body ?? "null") });
    const problem = {
      type: "about:blank",
      title: "A series here cannot hold this folder",
      status: 422,
      detail: "It has a stimulus of its own.",
      instance: path,
      code: "series.not-plannable",
      requestId: "0",
    };
    return Promise.resolve(
      new Response(JSON.stringify(problem), {
        status: 422,
        headers: { "content-type": "application/problem+json" },
      }),
    );
  });
  page = document.createElement("div");
  document.body.append(page);
  root = createRoot(page);
  await act(async () => {
    root.render(
      <AppRouterContext value={{ push: () => undefined } as never}>
        <QueryClientProvider client={makeQueryClient()}>
          <FolderScreen />
        </QueryClientProvider>
      </AppRouterContext>,
    );
    await settle();
  });
});
afterEach(() => {
  act(() => root.unmount());
  page.remove();
});

const settle = () => new Promise((resolve) => setTimeout(resolve, 20));

/** However busy the machine: as long as it takes, within reason. */
async function until(seen: () => boolean): Promise<void> {
  const end = Date.now() + 20_000;
  while (!seen() && Date.now() < end) await act(settle);
  expect(seen()).toBe(true);
}
const words = (): string => (page.textContent ?? "").replaceAll("\u00a0", " ");

async function choose(files: Readonly<Record<string, string>>): Promise<void> {
  const input = page.querySelector<HTMLInputElement>('input[aria-label="Choose a folder"]');
  const list = Object.entries(files).map(([path, text]) => {
    const file = new File([text], path.split("/").at(-1) ?? path);
    Object.defineProperty(file, "webkitRelativePath", { value: path });
    return file;
  });
  await act(async () => {
    if (input !== null) Object.defineProperty(input, "files", { value: list, configurable: true });
    input?.dispatchEvent(new Event("change", { bubbles: true }));
    await settle();
  });
}

describe("a chosen folder", () => {
  it.each([
    ["without series.json", { "s/76.wav": "x" }, "There is no series.json in it"],
    ["with a broken one", { "s/series.json": "{" }, "series.json is not JSON"],
    [
      "without a recording that it names",
      { "s/series.json": JSON.stringify(SERIES), "s/76.wav": "x" },
      "86.wav is not in the folder",
    ],
  ])("is refused %s, and nothing is asked of the server", async (_what, files, fault) => {
    await choose(files);
    await until(() => words().includes(fault));
    expect(page.querySelector("form")).toBeNull();
    expect(asked).toEqual([]);
  });

  it("shows what it holds, asks for the loudspeaker, and says why the server refuses", async () => {
    await choose({
      "s/series.json": JSON.stringify(SERIES),
      "s/76.wav": "abc",
      "s/86.wav": "abc",
    });
    await until(() => page.querySelector("form") !== null);
    expect(words()).toContain("2 files");
    expect(words()).toContain("2 runs");
    const field = (name: string) => page.querySelector<HTMLInputElement>(`input[name="${name}"]`);
    expect([field("maker")?.value, field("model")?.value]).toEqual(["Withy Lane", "Osier 5A"]);
    await act(async () => {
      page.querySelector("form")?.requestSubmit();
      await settle();
    });
    await until(() => words().includes("It has a stimulus of its own."));
    expect(asked.map(({ path }) => path)).toEqual(["/api/v1/series/from-folder"]);
    expect(asked[0]?.body).toMatchObject({
      series_json: JSON.stringify(SERIES),
      loudspeaker: { maker: "Withy Lane", model: "Osier 5A", kind: "other" },
    });
  });
});
