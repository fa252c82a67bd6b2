import { afterEach, describe, expect, it } from "vitest";
import { ApiProblem } from "@/lib/api/client";
import type { WantedDecision } from "@/lib/review/decide";
import type { Decision } from "@/lib/review/review-schema";
import { DecisionOutbox } from "./decision-outbox";

const want = (nominal_Hz: number, seen_version = 0): WantedDecision => ({
  nominal_Hz,
  cause: "limiter",
  reason: null,
  seen_version,
});
const theirs = (nominal_Hz: number, version: number): Decision => ({
  nominal_Hz,
  version,
  cause: "compressor",
  computed_cause: "limiter",
  changed: true,
  reason: "slope 0.4 in the repeat",
  by: { id: "5c1e7c52-0000-4000-8000-000000000001", name: "Maro Oduya" },
  at: "2026-05-11T09:14:00.000Z",
});
const toTaken = ({ nominal_Hz, seen_version }: WantedDecision): Decision =>
  theirs(nominal_Hz, seen_version + 1);
const problem = (status: number, code: string, details?: Record<string, unknown>): ApiProblem =>
  new ApiProblem({
    type: "about:blank",
    title: code,
    status,
    detail: `refused: ${code}`,
    instance: "/",
    code,
    requestId: "r",
    ...(details === undefined ? {} : { details }),
  });
const lost = problem(0, "connection.lost");

/** A server that answers as it is told, one answer after the other; then it takes everything. */
function bench(...answers: (Error | "taken")[]) {
  const sent: WantedDecision[][] = [];
  const told = { taken: 0, stale: 0 };
  const outbox = new DecisionOutbox<{ decisions: Decision[] }>({
    send: (decisions) => {
      sent.push([...decisions]);
      const answer = answers.shift() ?? "taken";
      return answer === "taken"
        ? Promise.resolve({ decisions: sent.flat().map((one) => toTaken(one)) })
        : Promise.reject(answer);
    },
    onTaken: () => (told.taken += 1),
    onStale: () => (told.stale += 1),
    now: () => 1000,
    retryAfterMs: 60_000,
  });
  running.push(outbox);
  return { outbox, sent, told };
}
const running: DecisionOutbox<{ decisions: Decision[] }>[] = [];
afterEach(() => running.splice(0).forEach((outbox) => outbox.stop()));
const settled = (): Promise<void> => new Promise((resolve) => setTimeout(resolve, 5));

describe("DecisionOutbox", () => {
  it("sends one act after the other, in order", async () => {
    const { outbox, sent, told } = bench();
    outbox.add([want(63)]);
    outbox.add([want(80)]);
    outbox.add([]);
    expect(sent).toHaveLength(1);
    await settled();
    expect(sent).toEqual([[want(63)], [want(80)]]);
    expect(told.taken).toBe(2);
    expect(outbox.getState()).toMatchObject({ acts: [], lostSinceMs: null });
  });

  it("hands an act over to the answer in one step, so that it is never out of sight", async () => {
    const { outbox } = bench();
    const seen: number[][] = [];
    outbox.subscribe(() => {
      const { acts, taken } = outbox.getState();
      seen.push([acts.length, ...taken.map((one) => one.nominal_Hz)]);
    });
    outbox.add([want(63)]);
    await settled();
    expect(seen).toEqual([[1], [0, 63]]);
  });

  it("keeps what was decided while the connection is lost, and sends it in order", async () => {
    const { outbox, sent } = bench(lost, lost);
    outbox.add([want(63)]);
    await settled();
    outbox.add([want(80)]);
    outbox.add([want(100), want(125)]);
    await settled();
    expect(outbox.getState()).toMatchObject({ lostSinceMs: 1000, conflict: null, fault: null });
    expect(outbox.getState().acts.flatMap((act) => act.decisions)).toHaveLength(4);
    outbox.retry();
    await settled();
    expect(sent.slice(2)).toEqual([[want(63)], [want(80)], [want(100), want(125)]]);
    expect(outbox.getState()).toMatchObject({ acts: [], lostSinceMs: null });
  });

  const conflict = problem(409, "conflict.changed", { conflicts: [theirs(63, 4)] });

  it("holds both decisions up, and what follows with them", async () => {
    const { outbox, sent, told } = bench(conflict);
    outbox.add([want(63), want(80)]);
    outbox.add([want(63, 1)]);
    await settled();
    const { conflict: held, acts } = outbox.getState();
    expect(held?.theirs[0]).toMatchObject({ nominal_Hz: 63, cause: "compressor" });
    expect(held?.mine.map((one) => one.nominal_Hz)).toEqual([63, 80]);
    expect([acts.length, sent.length, told.stale]).toEqual([1, 1, 1]);
  });

  it("keeps theirs, and sends on what else was decided", async () => {
    const { outbox, sent } = bench(conflict);
    outbox.add([want(63), want(80)]);
    outbox.add([want(63, 1)]);
    outbox.add([want(100)]);
    await settled();
    outbox.keepTheirs();
    await settled();
    expect(sent.slice(1)).toEqual([[want(80)], [want(100)]]);
    expect(outbox.getState()).toMatchObject({ acts: [], conflict: null });
  });

  it("puts mine on theirs with a reason, and counts what follows on from there", async () => {
    const { outbox, sent } = bench(conflict);
    outbox.add([want(63), want(80)]);
    outbox.add([want(63, 1)]);
    await settled();
    outbox.takeMine("the repeat was clipped");
    await settled();
    expect(sent.slice(1)).toEqual([
      [{ ...want(63, 4), reason: "the repeat was clipped" }, want(80)],
      [want(63, 5)],
    ]);
  });

  it("says why an act was refused, and drops what counted on it", async () => {
    const { outbox, told } = bench(problem(409, "conflict.state"));
    outbox.add([want(63)]);
    outbox.add([want(63, 1)]);
    await settled();
    expect(outbox.getState().acts).toEqual([]);
    expect(outbox.getState().fault).toContain("refused: conflict.state");
    expect(outbox.getState().fault).toContain("1 later decision");
    expect(told.stale).toBe(1);
    outbox.dismissFault();
    expect(outbox.getState().fault).toBeNull();
  });
});
