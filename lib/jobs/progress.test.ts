import { describe, expect, it } from "vitest";
import type { OnProgress } from "../analysis/types";
import { advanceProgress, startProgress } from "./progress";

const start = startProgress([
  { file: "76.wav", label: "76 dB short-term" },
  { file: "86.wav", label: "86 dB short-term" },
]);
type Event = Parameters<OnProgress>[0];
const after = (...events: Event[]) => events.reduce(advanceProgress, start);
const at = (file: string | null, stage: Event["stage"], done = 1, total = 1): Event => ({
  file,
  stage,
  done,
  total,
});
const states = (progress: typeof start) =>
  progress.runs.map((run) => run.stages.map((stage) => stage.state[0]).join(""));

describe("progress by run and stage", () => {
  it.each<[string, Event[], string[], number]>([
    ["nothing yet", [], ["www", "www"], 0],
    ["being read", [at("76.wav", "read")], ["gww", "www"], 0],
    ["being aligned", [at("76.wav", "aligned", 0)], ["gww", "www"], 0],
    ["aligned", [at("76.wav", "aligned")], ["dww", "www"], 1],
    ["a stage passed over counts", [at("76.wav", "floor")], ["ddd", "www"], 3],
    ["two runs", [at("76.wav", "floor"), at("86.wav", "harmonics", 0, 3)], ["ddd", "dgw"], 4],
    ["levels going", [at(null, "levels", 0)], ["ddd", "ddd"], 6],
    ["all done", [at(null, "onset")], ["ddd", "ddd"], 8],
    ["an unknown file", [at("x.wav", "floor")], ["www", "www"], 0],
  ])("%s", (_name, events, expected, done) => {
    const progress = after(...events);
    expect(states(progress)).toEqual(expected);
    expect([progress.done, progress.total]).toEqual([done, 8]);
  });

  it("never goes back", () => {
    const progress = after(at("76.wav", "floor"), at("76.wav", "read"));
    expect(states(progress)[0]).toBe("ddd");
    expect(progress.done).toBe(3);
  });
});
