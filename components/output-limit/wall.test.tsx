// @vitest-environment happy-dom
import { act, useState } from "react";
import { createRoot, type Root } from "react-dom/client";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { toBandColumns, type BandDecision } from "@/lib/charts/band-columns";
import { toWall } from "@/lib/charts/wall";
import { makeSampleResult } from "../../tests/support/sample-result";
import { CrosshairProvider } from "../parts/crosshair";
import { Wall, type WallKeys } from "./wall";

const decisions = new Map<number, BandDecision>([[50, { state: "confirmed", cause: "limiter" }]]);
const columns = toBandColumns({
  result: makeSampleResult(),
  criterion: { thd_percent: 10, compression_dB: 3 },
  decisions,
});
const figure = toWall(columns);

function Harness({ start, keys, seen }: { start: number | null; keys: WallKeys; seen: number[] }) {
  const [hz, setHz] = useState(start);
  return (
    <CrosshairProvider>
      <Wall
        figure={figure}
        columns={columns}
        selectedHz={hz}
        onSelect={(next) => {
          seen.push(next);
          setHz(next);
        }}
        {...keys}
      />
    </CrosshairProvider>
  );
}

let root: Root;
let page: HTMLElement;
let seen: number[];

beforeEach(() => {
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  page = document.createElement("div");
  document.body.append(page);
  root = createRoot(page);
  seen = [];
});
afterEach(() => {
  act(() => root.unmount());
  page.remove();
});

const show = (start: number | null, keys: WallKeys = {}): void =>
  act(() => root.render(<Harness start={start} keys={keys} seen={seen} />));
const buttons = (): Element[] => [...page.querySelectorAll('[role="button"]')];
const stops = (): Element[] =>
  buttons().filter((button) => button.getAttribute("tabindex") === "0");
const current = (): string => stops()[0]?.getAttribute("aria-label") ?? "";
function press(key: string): boolean {
  const [stop] = stops();
  const event = new KeyboardEvent("keydown", { key, bubbles: true, cancelable: true });
  act(() => void stop?.dispatchEvent(event));
  return event.defaultPrevented;
}

describe("the wall by keyboard", () => {
  it("is one tab stop of 27 buttons, each named in full", () => {
    show(63);
    expect(buttons()).toHaveLength(27);
    expect(stops()).toHaveLength(1);
    expect(current()).toMatch(
      /^63 hertz: limit \d+\.\d.dB set by compression, onset .* limiter, no decision yet$/,
    );
    expect(buttons()[1]?.getAttribute("aria-label")).toMatch(/limiter, confirmed$/);
  });
  it("starts at the first band where none is selected", () => {
    show(null);
    expect(current()).toMatch(/^40 hertz/);
    expect(buttons().some((button) => button.getAttribute("aria-pressed") === "true")).toBe(false);
  });
  it.each([
    ["ArrowRight", 80],
    ["ArrowLeft", 50],
    ["Home", 40],
    ["End", 16_000],
  ])("%s goes to %d Hz, and the focus with it", (key, hz) => {
    show(63);
    expect(press(key)).toBe(true);
    expect(seen).toEqual([hz]);
    expect(document.activeElement).toBe(stops()[0]);
    expect(stops()[0]?.getAttribute("aria-pressed")).toBe("true");
  });
  it("stays at its ends", () => {
    show(40);
    press("ArrowLeft");
    expect(seen).toEqual([40]);
    expect(document.activeElement).toBe(stops()[0]);
  });
  it("follows no selection that comes from elsewhere, even after a press at its end", () => {
    show(40);
    press("Home");
    act(() => void buttons()[5]?.dispatchEvent(new MouseEvent("click", { bubbles: true })));
    expect(seen).toEqual([40, 125]);
    expect(document.activeElement).toBe(buttons()[0]);
  });
  it("picks causes by 1 to 8, goes on by Enter and N", () => {
    const told: string[] = [];
    show(63, {
      onCause: (cause) => told.push(cause),
      onEnter: () => told.push("enter"),
      onNextOpen: () => told.push("next"),
    });
    for (const key of ["1", "8", "Enter", "n"]) press(key);
    expect(told).toEqual(["limiter", "unresolved", "enter", "next"]);
  });
  it("leaves keys alone that mean nothing here", () => {
    show(63);
    for (const key of ["1", "Enter", "n", "Tab", "ArrowUp", "9", "0"])
      expect(press(key)).toBe(false);
    expect(seen).toEqual([]);
  });
  it("selects by a press", () => {
    show(63);
    act(() => void buttons()[5]?.dispatchEvent(new MouseEvent("click", { bubbles: true })));
    expect(seen).toEqual([125]);
  });
  it("extends the selection with Shift, by key and by press", () => {
    const told: number[] = [];
    act(() =>
      root.render(
        <CrosshairProvider>
          <Wall
            figure={figure}
            columns={columns}
            selectedHz={63}
            range={new Set([50, 63])}
            onSelect={(hz) => seen.push(hz)}
            onExtend={(hz) => told.push(hz)}
          />
        </CrosshairProvider>,
      ),
    );
    const pressed = buttons().filter((one) => one.getAttribute("aria-pressed") === "true");
    expect(pressed.map((one) => one.getAttribute("data-band"))).toEqual(["50", "63"]);
    const key = { key: "ArrowRight", shiftKey: true, bubbles: true, cancelable: true };
    act(() => void stops()[0]?.dispatchEvent(new KeyboardEvent("keydown", key)));
    const click = new MouseEvent("click", { bubbles: true, shiftKey: true });
    act(() => void buttons()[5]?.dispatchEvent(click));
    expect([told, seen]).toEqual([[80, 125], []]);
  });
  it("names the whole in one sentence", () => {
    show(63);
    expect(page.querySelector('[role="group"]')?.getAttribute("aria-label")).toMatch(
      /^Gives out first at 50.Hz/,
    );
  });
});
