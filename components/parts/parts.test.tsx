// @vitest-environment happy-dom
import { act, useState, type ReactNode } from "react";
import { createRoot, type Root } from "react-dom/client";
import { renderToStaticMarkup } from "react-dom/server";
import { afterEach, beforeEach, describe, expect, it, vi } from "vitest";
import type { Step } from "@/lib/api/series";
import { levelRamp } from "@/lib/charts/tokens";
import { Button, Unavailable } from "./button";
import { Checkbox } from "./checkbox";
import { Dialog } from "./dialog";
import { Field, TextInput } from "./field";
import { LevelSwatch } from "./level-swatch";
import { BlockNotice, SlimNotice } from "./notice";
import { ProgressBar } from "./progress-bar";
import { SegmentedControl } from "./segmented-control";
import { StateBoxes, StateSquares } from "./state-boxes";
import { NoValue, SortTh } from "./table";
import { ValuesGrid } from "./values-grid";
import { ValuesTable } from "./values-table";

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
const show = (content: ReactNode): void => act(() => root.render(content));

const WARNING = {
  signal: "WARNING",
  lead: "Up to 104 dB at 1 m:",
  text: "not without hearing protection.",
} as const;

describe("hearing notices", () => {
  it.each([
    ["slim", <SlimNotice key="slim" notice={WARNING} />],
    ["block", <BlockNotice key="block" notice={WARNING} />],
  ])("%s says signal word, hazard and how to avoid it, and cannot be closed", (_, notice) => {
    show(notice);
    const note = page.querySelector('[role="note"]');
    expect(note?.textContent).toContain("WARNING");
    expect(note?.textContent).toContain("Up to 104 dB at 1 m:");
    expect(note?.textContent).toContain("not without hearing protection.");
    expect(page.querySelector("button, details")).toBeNull();
    expect(page.innerHTML).toContain("bg-warning");
  });
  it("has the caution's own colour", () => {
    show(<SlimNotice notice={{ ...WARNING, signal: "CAUTION" }} />);
    expect(page.innerHTML).toContain("bg-caution");
    expect(page.innerHTML).not.toContain("bg-warning");
  });
});

describe("fields", () => {
  it("tie label, control and fault together", () => {
    show(
      <Field
        label="distance, m"
        error="Distance must be from 0.25 to 10 m."
        hint="not shown with a fault"
      >
        {(control) => <TextInput {...control} />}
      </Field>,
    );
    const input = page.querySelector("input");
    const note = document.getElementById(input?.getAttribute("aria-describedby") ?? "");
    expect(page.querySelector("label")?.getAttribute("for")).toBe(input?.id);
    expect(input?.getAttribute("aria-invalid")).toBe("true");
    expect(note?.textContent).toBe("Distance must be from 0.25 to 10 m.");
  });
  it("describe nothing where there is nothing to say", () => {
    show(<Field label="serial">{(control) => <TextInput {...control} />}</Field>);
    expect(page.querySelector("input")?.hasAttribute("aria-describedby")).toBe(false);
    expect(page.querySelector("input")?.hasAttribute("aria-invalid")).toBe(false);
  });
});

describe("buttons", () => {
  it("take no second press while busy", () => {
    show(<Button busy>Save</Button>);
    expect(page.querySelector("button")?.disabled).toBe(true);
    expect(page.querySelector("button")?.getAttribute("aria-busy")).toBe("true");
  });
  it("that are not available stay reachable and give their reason", () => {
    show(<Unavailable reason="All bands need a decision.">Sign off</Unavailable>);
    const button = page.querySelector("button");
    expect(button?.getAttribute("aria-disabled")).toBe("true");
    expect(button?.disabled).toBe(false);
    expect(
      document.getElementById(button?.getAttribute("aria-describedby") ?? "")?.textContent,
    ).toBe("All bands need a decision.");
  });
});

describe("a segmented control", () => {
  function Harness() {
    const [value, setValue] = useState("10");
    return (
      <SegmentedControl
        legend="THD"
        value={value}
        onChange={setValue}
        segments={[
          { value: "3", label: "3 %" },
          { value: "10", label: "10 %", count: 4 },
          { value: "off", label: "off", disabled: true },
        ]}
      />
    );
  }
  it("is a named group of radio buttons of which one is chosen", () => {
    show(<Harness />);
    const radios = [...page.querySelectorAll("input")];
    expect(page.querySelector("legend")?.textContent).toBe("THD");
    expect(new Set(radios.map((radio) => radio.name)).size).toBe(1);
    expect(radios.map((radio) => radio.checked)).toEqual([false, true, false]);
    expect(radios.map((radio) => radio.disabled)).toEqual([false, false, true]);
    act(() => radios[0]?.click());
    expect([...page.querySelectorAll("input")].map((radio) => radio.checked)).toEqual([
      true,
      false,
      false,
    ]);
  });
});

describe("the five boxes", () => {
  const step = (name: Step["step"], done: boolean, share: number): Step => ({
    step: name,
    done,
    share,
    detail: `about ${name}`,
  });
  const steps = [
    step("captured", true, 1),
    step("analysed", true, 1),
    step("in review", false, 0.44),
    step("signed off", false, 0),
    step("published", false, 0),
  ];
  it("mark the first step that is not done as the present one", () => {
    show(<StateBoxes steps={steps} />);
    const items = [...page.querySelectorAll("li")];
    expect(items.map((item) => item.getAttribute("aria-current"))).toEqual([
      null,
      null,
      "step",
      null,
      null,
    ]);
    expect(items[0]?.textContent).toContain("captured, done");
    expect(items[2]?.querySelector("rect")?.getAttribute("width")).toBe("44");
  });
  it.each([
    ["planned", 0, 0],
    ["capturing", 0, 1],
    ["in review", 2, 1],
    ["signed off", 4, 0],
  ] as const)("as squares: %s has %d full and %d half", (state, full, half) => {
    show(<StateSquares state={state} note="" />);
    const heights = [...page.querySelectorAll("rect.fill-ink")].map((rect) =>
      rect.getAttribute("height"),
    );
    expect(heights.filter((height) => height === "8")).toHaveLength(full);
    expect(heights.filter((height) => height === "4")).toHaveLength(half);
  });
});

describe("tables", () => {
  it("say which column sorts and which way", () => {
    show(
      <table>
        <thead>
          <tr>
            <SortTh sorted="descending" onSort={() => undefined}>
              Last change
            </SortTh>
            <SortTh sorted={null} onSort={() => undefined}>
              Series
            </SortTh>
          </tr>
        </thead>
      </table>,
    );
    expect([...page.querySelectorAll("th")].map((th) => th.getAttribute("aria-sort"))).toEqual([
      "descending",
      null,
    ]);
  });
  it("say that a dot is no value", () => {
    show(<NoValue />);
    expect(page.querySelector(".sr-only")?.textContent).toBe("no value yet");
  });
  it("of values have a head per row and a caption", () => {
    show(
      <ValuesGrid
        caption="Output limit by band"
        columns={[
          { key: "band", head: "band" },
          { key: "limit", head: "limit, dB SPL" },
        ]}
        rows={[{ id: 63, cells: { band: "63 Hz", limit: "94.0" } }]}
      />,
    );
    expect(page.querySelector("caption")?.textContent).toBe("Output limit by band");
    expect(page.querySelector('th[scope="row"]')?.textContent).toBe("63 Hz");
    expect(page.querySelector("td")?.textContent).toBe("94.0");
  });
  it("of values sorts by any column, and leaves what has no number at the foot", () => {
    const limits = ["94.0", "in the noise", "at least 102.7 dB", "−0.3"];
    const columns = [
      { key: "band", head: "band" },
      { key: "limit", head: "limit" },
    ];
    const rows = limits.map((limit, at) => ({ id: at, cells: { band: `${at}`, limit } }));
    show(<ValuesGrid caption="Limits" columns={columns} rows={rows} />);
    const order = () => [...page.querySelectorAll("td")].map((cell) => cell.textContent);
    const head = page.querySelectorAll("thead button")[1];
    expect(order()).toEqual(limits);
    act(() => (head as HTMLButtonElement).click());
    const first = order();
    act(() => (head as HTMLButtonElement).click());
    const second = order();
    const up = ["−0.3", "94.0", "at least 102.7 dB", "in the noise"];
    const down = ["at least 102.7 dB", "94.0", "−0.3", "in the noise"];
    expect([first, second]).toContainEqual(up);
    expect([first, second]).toContainEqual(down);
    expect(page.querySelector("th[aria-sort]")?.textContent).toBe("limit");
  });
  it("of values come when their disclosure is opened", async () => {
    show(
      <ValuesTable
        caption="Limits"
        columns={[{ key: "band", head: "band" }]}
        rows={[{ id: 63, cells: { band: "63 Hz" } }]}
      />,
    );
    expect(page.querySelector("summary")?.textContent).toBe("Table of values");
    expect(page.querySelector("table")).toBeNull();
    await act(async () => {
      page.querySelector("details")?.dispatchEvent(new Event("toggle"));
      await vi.dynamicImportSettled();
    });
    expect(page.querySelector("caption")?.textContent).toBe("Limits");
  });
});

describe("a dialog", () => {
  it("is named by its title, closes by its button and keeps keys to itself", () => {
    let closed = 0;
    let leaked = 0;
    const onKey = (): number => (leaked += 1);
    document.addEventListener("keydown", onKey);
    show(
      <Dialog
        open
        title="Remove the take"
        onClose={() => (closed += 1)}
        actions={<Button tone="main">Remove</Button>}
      >
        It cannot be brought back.
      </Dialog>,
    );
    const dialog = page.querySelector("dialog");
    expect(
      document.getElementById(dialog?.getAttribute("aria-labelledby") ?? "")?.textContent,
    ).toBe("Remove the take");
    expect(dialog?.open).toBe(true);
    const buttons = [...page.querySelectorAll("button")];
    expect(buttons.map((button) => button.textContent)).toEqual(["Remove", "Cancel"]);
    act(
      () =>
        void buttons[0]?.dispatchEvent(new KeyboardEvent("keydown", { key: "n", bubbles: true })),
    );
    act(() => buttons[1]?.click());
    document.removeEventListener("keydown", onKey);
    expect(closed).toBe(1);
    expect(leaked).toBe(0);
  });
});

describe("marks and bars", () => {
  const [level] = levelRamp(1);
  it("cut the swatch of a long-term run", () => {
    if (level === undefined) throw new Error("no level");
    const rects = (longTerm: boolean): number =>
      renderToStaticMarkup(<LevelSwatch paint={level} longTerm={longTerm} />).split("<rect")
        .length - 1;
    expect(rects(true)).toBe(rects(false) + 1);
  });
  it("say how far a transfer is", () => {
    show(<ProgressBar label="76.wav" done={0.634} say="1.2 of 1.9 MB" />);
    const bar = page.querySelector('[role="progressbar"]');
    expect(bar?.getAttribute("aria-valuenow")).toBe("63");
    expect(bar?.getAttribute("aria-valuetext")).toBe("1.2 of 1.9 MB");
  });
  it("need no inline style, which the page's policy forbids", () => {
    const markup = renderToStaticMarkup(
      <>
        <SlimNotice notice={WARNING} />
        <Checkbox>H2</Checkbox>
        <ProgressBar label="x" done={0.5} />
        <StateSquares state="in review" note="" />
      </>,
    );
    expect(markup).not.toContain("style=");
  });
});
