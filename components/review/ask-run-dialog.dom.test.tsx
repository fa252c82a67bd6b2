// @vitest-environment happy-dom
import { QueryClientProvider } from "@tanstack/react-query";
import { act } from "react";
import { createRoot, type Root } from "react-dom/client";
import { afterEach, beforeEach, describe, expect, it } from "vitest";
import type { SessionView } from "@/lib/api/session";
import { labSettingsSchema } from "@/lib/labs/settings-schema";
import type { Band } from "@/lib/result/result-schema";
import { planSchema } from "@/lib/series/plan-schema";
import { makeSampleResult } from "../../tests/support/sample-result";
import { LabSessionProvider } from "../frame/lab-session";
import { makeQueryClient } from "../queries/query-provider";
import { AskRunDialog } from "./ask-run-dialog";

const SESSION: SessionView = {
  account: { id: "1", email: "a@lab.test", name: "Ines Varley", theme: "system" },
  lab: {
    id: "2",
    slug: "lab",
    name: "Lab",
    time_zone: "UTC",
    settings: labSettingsSchema.parse({}),
  },
  roles: ["analyst"],
  labs: [],
  via: "session",
};

let root: Root;
let page: HTMLElement;
beforeEach(() => {
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  page = document.createElement("div");
  document.body.append(page);
  root = createRoot(page);
});
afterEach(() => {
  act(() => root.unmount());
  page.remove();
});

const plain = (text: string | null | undefined): string => (text ?? "").replaceAll("\u00a0", " ");
const cost = (): string => plain(page.querySelector("output")?.textContent).trim();

function bandWith(over: Partial<Band>): Band {
  const band = makeSampleResult().bands.find((one) => one.evidence.next_run !== null);
  if (band === undefined) throw new Error("no band of the sample has a next run");
  return { ...band, ...over };
}

describe("AskRunDialog", () => {
  it("says what the run costs, and what another level would bring", async () => {
    const { evidence } = bandWith({});
    const candidates = [
      { level_dB: 91, width_expected_dB: 1.3 },
      { level_dB: 92, width_expected_dB: 0.9 },
    ];
    const next_run = { level_dB: 92, width_now_dB: 2.5, width_expected_dB: 0.9, candidates };
    const band = bandWith({ evidence: { ...evidence, next_run } });
    act(() =>
      root.render(
        <QueryClientProvider client={makeQueryClient()}>
          <LabSessionProvider session={SESSION}>
            <AskRunDialog
              series={{ id: "3", plan: planSchema.parse({}) }}
              band={band}
              onClose={() => undefined}
            />
          </LabSessionProvider>
        </QueryClientProvider>,
      ),
    );
    expect(plain(page.textContent)).toContain("from 2.5 to about 0.9 dB.");
    expect(cost()).toBe(
      "It takes 13 s, at 92 dB(A) where the tester stands: 0.20 % of the day’s allowance (NIOSH).",
    );
    const level = page.querySelector("input");
    if (level === null) throw new Error("no field for the level");
    await act(async () => {
      // Past React's own setter, as a key press would.
      Reflect.set(HTMLInputElement.prototype, "value", "91", level);
      level.dispatchEvent(new Event("input", { bubbles: true }));
      await Promise.resolve();
    });
    expect(cost()).toContain(
      "After a run at 91 dB the interval would be about 1.3 dB wide; it is 2.5 now. It takes 13 s, at 91 dB(A)",
    );
  });
});
