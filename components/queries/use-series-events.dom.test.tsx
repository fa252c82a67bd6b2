// @vitest-environment happy-dom
import { QueryClient, QueryClientProvider, useQuery } from "@tanstack/react-query";
import { act } from "react";
import { createRoot, type Root } from "react-dom/client";
import { afterEach, beforeEach, expect, it, vi } from "vitest";
import { queryKeys } from "./query-keys";
import { ASK_EVERY_MS, NEW_STREAM_AFTER_MS, useSeriesEvents } from "./use-series-events";

/** Stands for the browser's stream, which no test environment brings along. */
class FakeStream extends EventTarget {
  static readonly CLOSED = 2;
  static opened: FakeStream[] = [];
  readyState = 0;
  constructor(readonly address: string) {
    super();
    FakeStream.opened.push(this);
  }
  close(): void {
    this.readyState = FakeStream.CLOSED;
  }
}

let root: Root;
let page: HTMLElement;
let asked = 0;

function Watcher() {
  const live = useSeriesEvents("s-1");
  useQuery({
    queryKey: queryKeys.series("s-1"),
    queryFn: () => {
      asked += 1;
      return asked;
    },
  });
  return live ? "live" : "asking";
}

const stream = (): FakeStream => {
  const last = FakeStream.opened.at(-1);
  if (last === undefined) throw new Error("no stream was opened");
  return last;
};
const wait = (ms: number) => act(() => vi.advanceTimersByTimeAsync(ms));
const tell = (event: string) => act(() => void stream().dispatchEvent(new Event(event)));

beforeEach(async () => {
  vi.useFakeTimers();
  Reflect.set(globalThis, "IS_REACT_ACT_ENVIRONMENT", true);
  Reflect.set(globalThis, "EventSource", FakeStream);
  FakeStream.opened = [];
  asked = 0;
  page = document.createElement("div");
  root = createRoot(page);
  act(() =>
    root.render(
      <QueryClientProvider client={new QueryClient()}>
        <Watcher />
      </QueryClientProvider>,
    ),
  );
  await wait(1);
});
afterEach(() => {
  act(() => root.unmount());
  vi.useRealTimers();
});

it("asks at intervals until the stream stands, then only when told", async () => {
  expect([page.textContent, asked]).toEqual(["asking", 1]);
  await wait(2 * ASK_EVERY_MS);
  expect(asked).toBe(3);
  tell("open");
  expect(page.textContent).toBe("live");
  await wait(10 * ASK_EVERY_MS);
  expect(asked).toBe(3);
  tell("change");
  await wait(1);
  expect(asked).toBe(4);
});

it("asks again at intervals when the stream breaks, and leaves the browser to mend it", async () => {
  tell("open");
  tell("error");
  await wait(4 * ASK_EVERY_MS);
  expect([page.textContent, asked, FakeStream.opened.length]).toEqual(["asking", 5, 1]);
});

it("opens a new stream where the browser gave the old one up", async () => {
  stream().close();
  tell("error");
  await wait(NEW_STREAM_AFTER_MS + 1);
  expect(FakeStream.opened).toHaveLength(2);
  expect(stream().address).toContain("/series/s-1/events");
  tell("open");
  expect(page.textContent).toBe("live");
});
