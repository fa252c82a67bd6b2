// @vitest-environment happy-dom
import { QueryClientProvider } from "@tanstack/react-query";
import { act } from "react";
import { createRoot, type Root } from "react-dom/client";
import { AppRouterContext } from "next/dist/shared/lib/app-router-context.shared-runtime";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import { makeQueryClient } from "../queries/query-provider";
import { PlanForm } from "./plan-form";

let root: Root;
let page: HTMLElement;

/** Stands for Next's router, which is not part of a bare page. */
const ROUTER = {
  push: () => undefined,
  replace: () => undefined,
  refresh: () => undefined,
  back: () => undefined,
  forward: () => undefined,
  prefetch: () => undefined,
};

beforeEach(async () => {
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  // No server answers here: the list of loudspeakers stays empty.
  Reflect.set(globalThis, "fetch", () => Promise.reject(new TypeError("no server")));
  page = document.createElement("div");
  document.body.append(page);
  root = createRoot(page);
  await act(async () => {
    root.render(
      <AppRouterContext value={ROUTER as never}>
        <QueryClientProvider client={makeQueryClient()}>
          <PlanForm series={null} rule="niosh" />
        </QueryClientProvider>
      </AppRouterContext>,
    );
    await Promise.resolve();
  });
});
afterEach(() => {
  act(() => root.unmount());
  page.remove();
});

const plain = (text: string | null | undefined): string => (text ?? "").replaceAll("\u00a0", " ");

function field(label: string): HTMLInputElement {
  const found = [...page.querySelectorAll("label")].find((l) => l.textContent === label);
  const control = document.getElementById(found?.htmlFor ?? "");
  if (!(control instanceof HTMLInputElement)) throw new Error(`no field ${label}`);
  return control;
}

/** Types as a person does: the value, then leaves the field. */
async function enter(label: string, text: string): Promise<HTMLInputElement> {
  const input = field(label);
  await act(async () => {
    // Past React's own setter, as a key press would.
    Reflect.set(HTMLInputElement.prototype, "value", text, input);
    input.dispatchEvent(new Event("input", { bubbles: true }));
    input.dispatchEvent(new FocusEvent("focusout", { bubbles: true }));
    await new Promise((resolve) => setTimeout(resolve, 50));
  });
  return input;
}

const button = (words: string): HTMLButtonElement | undefined =>
  [...page.querySelectorAll("button")].find((b) => b.textContent === words);

async function press(words: string): Promise<void> {
  await act(async () => {
    button(words)?.click();
    await new Promise((resolve) => setTimeout(resolve, 50));
  });
}

const aside = (): string => plain(page.querySelector("aside")?.textContent);

describe("the plan form", () => {
  it("says a fault on leaving the field, tied to it, and takes it back", async () => {
    const distance = await enter("distance, m", "0");
    expect(distance.getAttribute("aria-invalid")).toBe("true");
    const note = document.getElementById(distance.getAttribute("aria-describedby") ?? "");
    expect(note?.textContent).toBe("Distance must be from 0.25 to 10 m.");
    await enter("distance, m", "1,5");
    expect(distance.getAttribute("aria-invalid")).toBeNull();
  });

  it("takes numbers as people write them", async () => {
    const stop = await enter("end, Hz", "20 000");
    expect(stop.getAttribute("aria-invalid")).toBeNull();
    expect((await enter("length, s", "long")).getAttribute("aria-invalid")).toBe("true");
  });

  it("shows level, dose and WARNING of the usual plan, and follows the levels", async () => {
    expect(aside()).toContain("102 dB(A)");
    expect(page.querySelector('[role="note"]')?.textContent).toContain("WARNING");
    await enter("level, dB", "80");
    expect(aside()).toContain("80 to 102 dB");
    await press("Usual plan: 76, 86, 96, 102");
    expect(aside()).toContain("76 to 102 dB");
  });

  it("keeps the last whole plan and its notice while a field is wrong", async () => {
    await enter("minutes", "");
    expect(aside()).toContain("102 dB(A)");
    expect(page.querySelector('[role="note"]')).not.toBeNull();
  });

  it("adds a level where it tells most, and a long-term run at the top", async () => {
    const levels = (): string[] =>
      [
        ...page.querySelectorAll<HTMLInputElement>('input[name^="plan.levels"][name$="level_dB"]'),
      ].map((i) => i.value);
    await press("Add a level");
    expect(levels()).toEqual(["76", "86", "96", "102", "81"]);
    await press("Add a long-term run");
    expect(aside()).toContain("long-term sweep at 102 dB");
    expect(aside()).toContain("10 min conditioning at 93 dB");
  });

  it("offers no download before the plan is saved", () => {
    expect(aside()).toContain("Save the plan to download them.");
    expect(page.querySelector("aside a[download]")).toBeNull();
  });

  it("asks for maker and model instead of sending a plan without", async () => {
    await press("Save");
    expect(plain(page.textContent)).toContain("Enter the maker.");
    expect(plain(page.textContent)).toContain("Some fields are not right yet.");
  });
});
