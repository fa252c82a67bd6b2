// @vitest-environment happy-dom
import { QueryClientProvider } from "@tanstack/react-query";
import { act } from "react";
import { createRoot, type Root } from "react-dom/client";
import { afterEach, beforeEach, expect, it } from "vitest";
import type { ArchivedSeries } from "@/lib/api/keeping";
import type { SessionView } from "@/lib/api/session";
import { LabSessionProvider } from "../frame/lab-session";
import { queryKeys } from "../queries/query-keys";
import { makeQueryClient } from "../queries/query-provider";
import { KeepingScreen } from "./keeping-screen";

const ID = "7f3a0000-0000-4000-8000-000000000000";
let root: Root;
let page: HTMLElement;

beforeEach(() => {
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  Reflect.set(globalThis, "fetch", () => Promise.reject(new TypeError("no server")));
  page = document.createElement("div");
  document.body.append(page);
  root = createRoot(page);
});
afterEach(() => {
  act(() => root.unmount());
  page.remove();
});

function show(retentionDays: number | null, series: ArchivedSeries[]): void {
  const client = makeQueryClient();
  client.setQueryData(queryKeys.keeping, { retention_days: retentionDays, series });
  const session: SessionView = {
    account: { id: ID, email: "mina@saltmarsh.example", name: "Mina", theme: "system" },
    lab: null,
    roles: ["admin"],
    labs: [],
    via: "session",
  };
  act(() =>
    root.render(
      <LabSessionProvider session={session}>
        <QueryClientProvider client={client}>
          <KeepingScreen />
        </QueryClientProvider>
      </LabSessionProvider>,
    ),
  );
}

const held: ArchivedSeries = {
  id: ID,
  number: "S-0412",
  loudspeaker: "Withy Lane Osier 8A",
  archived_at: "2026-05-11T09:00:00.000Z",
  removable: 0,
  removable_bytes: 0,
  cited: 3,
  shared: 0,
  due_at: null,
};
const removeButton = () =>
  page.querySelector<HTMLButtonElement>('[aria-label^="Remove the recordings"]');

it("says that everything stays, and leads to the whole lab as a file", () => {
  show(null, []);
  expect(page.textContent).toContain("kept for good");
  expect(page.textContent).toContain("Nothing in the archive holds recordings");
  const link = page.querySelector<HTMLAnchorElement>('a[href="/api/v1/lab/export"]');
  expect(link?.textContent).toContain("Download the lab");
});

it("never offers to remove what a publication cites", () => {
  show(400, [held]);
  expect(page.textContent).toContain("400 days");
  expect(page.textContent).toContain("3 cited by a publication");
  expect(removeButton()).toBeNull();
});

it("offers to remove what nothing cites, and says what follows", () => {
  const due = { removable: 8, removable_bytes: 30_100_000, due_at: "2027-06-15T09:00:00.000Z" };
  show(400, [{ ...held, ...due }]);
  expect(page.textContent).toContain("8 recordings");
  act(() => removeButton()?.click());
  expect(document.body.textContent).toContain("cannot be brought back");
});
