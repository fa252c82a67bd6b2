/**
 * Decisions on their way to the server: sent one act after the other, in the order in which they
 * were taken. While the connection is lost they wait and are counted; where somebody else was
 * quicker, both decisions are held up for the person to choose.
 */
import { z } from "zod";
import { ApiProblem } from "@/lib/api/client";
import type { WantedDecision } from "@/lib/review/decide";
import { decisionSchema, type Decision } from "@/lib/review/review-schema";

export interface Conflict {
  /** What the person decided, conflicting bands or not: it was refused as a whole. */
  mine: readonly WantedDecision[];
  /** What others decided meanwhile. */
  theirs: readonly Decision[];
  /** When the person decided, ms. */
  atMs: number;
}

interface Act {
  decisions: readonly WantedDecision[];
  atMs: number;
}

export interface OutboxState {
  /** Acts that wait, oldest first; the first may be on its way. */
  acts: readonly Act[];
  /**
   * What the server had after the newest act that it took. Changed in one step with `acts`, so
   * that a decision never drops out of sight between being sent and being read back.
   */
  taken: readonly Decision[];
  /** When the connection was lost, ms. */
  lostSinceMs: number | null;
  conflict: Conflict | null;
  /** A refusal that is neither: the act is gone, and this says why. */
  fault: string | null;
}

interface Taken {
  decisions: readonly Decision[];
}

interface OutboxOptions<Answer extends Taken> {
  send: (decisions: readonly WantedDecision[]) => Promise<Answer>;
  /** The server took an act; its answer is the new truth. */
  onTaken: (answer: Answer) => void;
  /** What the screen knows is not what the server has. */
  onStale: () => void;
  now?: () => number;
  retryAfterMs?: number;
}

const conflictsSchema = z.object({ conflicts: z.array(decisionSchema).min(1) });
const EMPTY: OutboxState = {
  acts: [],
  taken: [],
  lostSinceMs: null,
  conflict: null,
  fault: null,
};

export class DecisionOutbox<Answer extends Taken> {
  private state = EMPTY;
  private sending = false;
  private timer: ReturnType<typeof setTimeout> | null = null;
  private readonly listeners = new Set<() => void>();

  constructor(private readonly options: OutboxOptions<Answer>) {}

  readonly getState = (): OutboxState => this.state;

  readonly subscribe = (listener: () => void): (() => void) => {
    this.listeners.add(listener);
    return () => this.listeners.delete(listener);
  };

  add(decisions: readonly WantedDecision[]): void {
    if (decisions.length === 0) return;
    const act = { decisions, atMs: this.now() };
    this.set({ acts: [...this.state.acts, act], fault: null });
    void this.pump();
  }

  /** Tries at once what waits for the connection. */
  readonly retry = (): void => void this.pump();

  /** Theirs stand; what else was in the refused act is sent on. */
  keepTheirs(): void {
    const { conflict, acts } = this.state;
    if (conflict === null) return;
    const given = new Set(conflict.theirs.map((one) => one.nominal_Hz));
    const without = (act: Act): Act => ({
      ...act,
      decisions: act.decisions.filter((one) => !given.has(one.nominal_Hz)),
    });
    const rest = [{ decisions: conflict.mine, atMs: conflict.atMs }, ...acts].map(without);
    this.goOn(rest.filter((act) => act.decisions.length > 0));
  }

  /** Mine follow on theirs. @param reason where one is needed or was changed; null leaves it. */
  takeMine(reason: string | null): void {
    const { conflict, acts } = this.state;
    if (conflict === null) return;
    const seen = new Map(conflict.theirs.map((one) => [one.nominal_Hz, one.version]));
    const mine = conflict.mine.map((one) =>
      seen.has(one.nominal_Hz) ? { ...one, reason: reason ?? one.reason } : one,
    );
    this.goOn(rebase([{ decisions: mine, atMs: conflict.atMs }, ...acts], seen));
  }

  dismissFault(): void {
    this.set({ fault: null });
  }

  /** Nothing is sent any more; for the end of a page. */
  stop(): void {
    if (this.timer !== null) clearTimeout(this.timer);
    this.timer = null;
  }

  private goOn(acts: readonly Act[]): void {
    this.set({ acts, conflict: null });
    void this.pump();
  }

  private async pump(): Promise<void> {
    if (this.sending) return;
    this.stop();
    this.sending = true;
    try {
      for (;;) {
        const [act] = this.state.acts;
        if (act === undefined || this.state.conflict !== null) return;
        // One after the other: each act counts on from the versions of the one before.
        // oxlint-disable-next-line no-await-in-loop
        if (!(await this.sendOne(act))) return;
      }
    } finally {
      this.sending = false;
    }
  }

  /** @returns whether the next may follow at once. */
  private async sendOne(act: Act): Promise<boolean> {
    try {
      const answer = await this.options.send(act.decisions);
      this.options.onTaken(answer);
      const acts = this.state.acts.slice(1);
      this.set({ acts, taken: answer.decisions, lostSinceMs: null });
      return true;
    } catch (error) {
      return this.refuse(act, error);
    }
  }

  private refuse(act: Act, error: unknown): boolean {
    if (error instanceof ApiProblem && error.retryable) {
      this.set({ lostSinceMs: this.state.lostSinceMs ?? this.now() });
      this.timer = setTimeout(this.retry, this.options.retryAfterMs ?? 5_000);
      return false;
    }
    const acts = this.state.acts.slice(1);
    const found =
      error instanceof ApiProblem && error.code === "conflict.changed"
        ? conflictsSchema.safeParse(error.problem.details)
        : null;
    if (found?.success === true) {
      const conflict = { mine: act.decisions, theirs: found.data.conflicts, atMs: act.atMs };
      this.set({ acts, conflict, lostSinceMs: null });
    } else {
      // What follows counted on this one: it cannot stand either.
      const words = error instanceof Error ? error.message : "The decision was not taken.";
      const more =
        acts.length === 0
          ? ""
          : ` ${acts.length === 1 ? "1 later decision was" : `${acts.length} later decisions were`} dropped with it.`;
      this.set({ acts: [], fault: `${words}${more}`, lostSinceMs: null });
    }
    this.options.onStale();
    return false;
  }

  private set(change: Partial<OutboxState>): void {
    this.state = { ...this.state, ...change };
    for (const listener of this.listeners) listener();
  }

  private now(): number {
    return (this.options.now ?? Date.now)();
  }
}

/** Counts the versions of waiting acts on from what the server has now. */
function rebase(acts: readonly Act[], seen: ReadonlyMap<number, number>): Act[] {
  const versions = new Map(seen);
  return acts.map((act) => ({
    ...act,
    decisions: act.decisions.map((one) => {
      const version = versions.get(one.nominal_Hz);
      if (version === undefined) return one;
      versions.set(one.nominal_Hz, version + 1);
      return { ...one, seen_version: version };
    }),
  }));
}
