/** What a person may do with recordings; the table hands it down, the screen carries it out. */
import type { RunAct, RunView } from "@/lib/api/runs";
import type { RunRow } from "./run-rows";

export interface RunActs {
  act: (run: RunView, act: RunAct) => Promise<void>;
  replace: (row: RunRow, files: File[]) => void;
  excuse: (row: RunRow, reason: string | null) => Promise<void>;
  remove: (run: RunView) => Promise<void>;
  stopUpload: (id: string) => void;
  goOnUpload: (id: string) => void;
  discardUpload: (id: string) => void;
  /** Of an upload begun elsewhere, by the server's id. */
  removeUpload: (id: string) => Promise<void>;
}
