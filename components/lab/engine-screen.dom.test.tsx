// @vitest-environment happy-dom
import { QueryClientProvider } from "@tanstack/react-query";
import { act } from "react";
import { createRoot, type Root } from "react-dom/client";
import { afterEach, beforeEach, expect, it } from "vitest";
import type { SessionView } from "@/lib/api/session";
import type { Role } from "@/lib/roles/roles";
import { LabSessionProvider } from "../frame/lab-session";
import { queryKeys } from "../queries/query-keys";
import { makeQueryClient } from "../queries/query-provider";
import { EngineScreen } from "./engine-screen";

const SERIES = "7f3a0000-0000-4000-8000-000000000000";
let root: Root;
let page: HTMLElement;
let asked: string[] = [];

beforeEach(() => {
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  asked = [];
  // The server takes the wish and says no more than that it cannot be met.
  Reflect.set(globalThis, "fetch", (address: string, { method }: RequestInit) => {
    asked.push(`${method} ${address}`);
    return Promise.reject(new TypeError("no server"));
  });
  page = document.createElement("div");
  document.body.append(page);
  root = createRoot(page);
});
afterEach(() => {
  act(() => root.unmount());
  page.remove();
});

function show(roles: Role[]): void {
  const client = makeQueryClient();
  client.setQueryData(queryKeys.engineChanges, {
    engine_version: "2.0.0",
    series: [
      {
        series_id: SERIES,
        number: "0412",
        name: "Osier 8A",
        published_engine: "1.0.0",
        changes: null,
      },
    ],
  });
  const session: SessionView = {
    account: { id: SERIES, email: "mina@saltmarsh.example", name: "Mina", theme: "system" },
    lab: null,
    roles,
    labs: [],
    via: "session",
  };
  act(() =>
    root.render(
      <LabSessionProvider session={session}>
        <QueryClientProvider client={client}>
          <EngineScreen />
        </QueryClientProvider>
      </LabSessionProvider>,
    ),
  );
}
const button = () =>
  page.querySelector<HTMLButtonElement>('[aria-label="Analyse Osier 8A by this engine"]');

it("lets a tester have a published series analysed by the present engine", async () => {
  show(["tester"]);
  await act(async () => {
    button()?.click();
    await new Promise((resolve) => setTimeout(resolve, 50));
  });
  expect(asked).toContain(`POST /api/v1/series/${SERIES}/analyses`);
  expect(page.querySelector('[role="alert"]')?.textContent).toMatch(/\w/);
});

it("offers it to nobody who may not analyse", () => {
  show(["reviewer"]);
  expect(page.textContent).toContain("Not analysed by this engine yet");
  expect(button()).toBeNull();
});
