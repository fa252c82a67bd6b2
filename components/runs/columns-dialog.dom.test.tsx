// @vitest-environment happy-dom
import { QueryClientProvider } from "@tanstack/react-query";
import { act } from "react";
import { createRoot, type Root } from "react-dom/client";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import type { ColumnChoice } from "@/lib/series/table-columns";
import { makeQueryClient } from "../queries/query-provider";
import { ColumnsDialog } from "./columns-dialog";

let root: Root;
let page: HTMLElement;
let chosen: (ColumnChoice | null)[] | null;
beforeEach(() => {
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  page = document.createElement("div");
  document.body.append(page);
  root = createRoot(page);
  chosen = null;
});
afterEach(() => {
  act(() => root.unmount());
  page.remove();
});

/** Until the file has been looked into. */
async function settle(): Promise<void> {
  for (let round = 0; round < 200; round += 1) {
    await act(() => new Promise((resolve) => setTimeout(resolve, 10)));
    if (page.querySelector('table, [role="alert"]') !== null) return;
  }
  throw new Error("the file was never looked into");
}
async function show(...texts: string[]): Promise<void> {
  const files = texts.map((text, at) => new File([text], `run${at}.csv`));
  act(() =>
    root.render(
      <QueryClientProvider client={makeQueryClient()}>
        <ColumnsDialog
          files={files}
          onChosen={(choices) => (chosen = choices)}
          onClose={() => undefined}
        />
      </QueryClientProvider>,
    ),
  );
  await settle();
}
const button = (words: string): HTMLButtonElement => {
  const found = [...page.querySelectorAll("button")].find((b) => b.textContent === words);
  if (found === undefined) throw new Error(`no button ${words}`);
  return found;
};
async function choose(column: number, meaning: string): Promise<void> {
  const select = page.querySelectorAll("select")[column - 1];
  if (select === undefined) throw new Error(`no column ${column}`);
  await act(async () => {
    select.value = meaning;
    select.dispatchEvent(new Event("change", { bubbles: true }));
    await Promise.resolve();
  });
}
const press = (words: string) => act(async () => Promise.resolve(button(words).click()));
const status = () => page.querySelector("output")?.textContent;

describe("ColumnsDialog", () => {
  it("asks for what the head does not tell, beside the first rows", async () => {
    await show("a;b\n76,5;20\n77,5;40");
    expect([...page.querySelectorAll("td")].map((cell) => cell.textContent)).toEqual([
      "76.5",
      "20",
      "77.5",
      "40",
    ]);
    expect(status()).toBe("Say which column is the frequency.");
    expect(button("Send").disabled).toBe(true);
    await choose(2, "frequency");
    await choose(1, "level");
    expect(status()).toContain("Levels are taken as dB SPL at 1 m");
    await press("Send");
    expect(chosen).toEqual([{ frequency: 2, level: 1, harmonics: [], kilohertz: false }]);
  });

  it("goes from table to table, and sends no mapping where the head tells", async () => {
    await show("Hz,dB\n20,80\n40,81", "x,y\n20,80\n40,81");
    expect(page.querySelector("h2")?.textContent).toBe("What is in this table? (1 of 2)");
    await press("Next table");
    await settle();
    await choose(1, "frequency");
    await choose(2, "level");
    await press("Send");
    expect(chosen).toEqual([null, { frequency: 1, level: 2, harmonics: [], kilohertz: false }]);
  });

  it("says what is wrong with a file that is no table, and sends nothing", async () => {
    await show("Dear diary,\nnothing happened.");
    expect(page.querySelector('[role="alert"]')?.textContent).toContain(
      "run0.csv holds no rows of frequency and level",
    );
    expect([...page.querySelectorAll("button")].map((b) => b.textContent)).toEqual(["Cancel"]);
  });
});
