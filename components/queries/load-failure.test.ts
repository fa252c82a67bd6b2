import { expect, it, vi } from "vitest";
import { findLoadFailure } from "./load-failure";

type Given = Parameters<typeof findLoadFailure>[0];
const query = (error: Error | null, isLoadingError: boolean) => ({
  error,
  isLoadingError,
  refetch: vi.fn<Given[number]["refetch"]>(),
});
const find = (...queries: ReturnType<typeof query>[]) => findLoadFailure(queries);

it("leaves on the screen what could only not be asked for anew", () => {
  expect(find(query(null, false), query(new Error("lost"), false))).toBeNull();
});

it("asks again for what is missing alone", () => {
  const [fine, stale, missing] = [
    query(null, false),
    query(new Error("lost"), false),
    query(new Error("gone"), true),
  ];
  const failure = find(fine, stale, missing);
  expect(failure?.error.message).toBe("gone");
  failure?.retry();
  expect([fine, stale, missing].map((one) => one.refetch.mock.calls.length)).toEqual([0, 0, 1]);
});
