// @vitest-environment happy-dom
import { act } from "react";
import { createRoot, type Root } from "react-dom/client";
import { afterEach, beforeEach, expect, it, vi } from "vitest";
import { AccountMenu } from "./account-menu";

let root: Root;
let page: HTMLElement;
let signedOut = 0;

beforeEach(() => {
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  signedOut = 0;
  page = document.createElement("div");
  document.body.append(page);
  root = createRoot(page);
  act(() =>
    root.render(
      <AccountMenu
        name="Mina Oduya"
        roles={["tester", "analyst"]}
        lab={{ id: "a", name: "Saltmarsh Acoustics" }}
        labs={[{ id: "a", name: "Saltmarsh Acoustics" }]}
        onSwitchLab={() => undefined}
        onSignOut={() => (signedOut += 1)}
      />,
    ),
  );
});
afterEach(() => {
  act(() => root.unmount());
  page.remove();
});

const trigger = (): HTMLButtonElement => {
  const found = page.querySelector("button");
  if (found === null) throw new Error("no button");
  return found;
};
const items = (): (string | null)[] =>
  [...document.querySelectorAll('[role="menuitem"]')].map((item) => item.textContent);
const settle = async (act_: () => void): Promise<void> =>
  act(async () => {
    act_();
    await vi.dynamicImportSettled();
    await new Promise((resolve) => setTimeout(resolve, 50));
  });

it("says who is signed in before its script has come", () => {
  expect(trigger().textContent).toBe("Mina Oduyatester, analyst");
  expect(trigger().getAttribute("aria-haspopup")).toBe("menu");
  expect(items()).toEqual([]);
});

it.each([
  ["a click", () => trigger().click()],
  [
    "the arrow key",
    () =>
      trigger().dispatchEvent(new KeyboardEvent("keydown", { key: "ArrowDown", bubbles: true })),
  ],
])("opens at %s, and leads out", async (_, open) => {
  await settle(open);
  expect(items()).toEqual(["Account", "Sign out"]);
  expect(trigger().getAttribute("aria-expanded")).toBe("true");
  await settle(() =>
    [...document.querySelectorAll<HTMLElement>('[role="menuitem"]')].at(-1)?.click(),
  );
  expect(signedOut).toBe(1);
  expect(items()).toEqual([]);
});
