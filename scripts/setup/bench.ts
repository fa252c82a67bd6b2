/** What a file under scripts/bench exports as `benches`. */
export interface Bench {
  /** Key in the JSON, with its unit: "restart_s". */
  key: string;
  /** What is measured, for people. */
  name: string;
  unit: string;
  /** How often it runs; the median counts. */
  runs: number;
  /** Measures once and gives the figure in `unit`. */
  run: () => Promise<number>;
  /** Why it cannot run on this machine; null where it can. It is then reported as null. */
  missing?: () => string | null;
  /** Made before the first run and taken away after the last. */
  before?: () => Promise<void>;
  after?: () => Promise<void>;
}
