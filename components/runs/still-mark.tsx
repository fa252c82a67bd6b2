import type { RecordingRole } from "@/lib/series/planned-runs";

/** The sign of a recording that has no level: a tone for the calibrator, a rustle for the room. */
export function StillMark({ role }: { role: RecordingRole }) {
  return (
    <svg className="flex-none" width="16" height="16" viewBox="0 0 16 16" aria-hidden="true">
      <path
        fill="none"
        stroke="currentColor"
        strokeWidth={role === "ambient" ? 1.4 : 1.8}
        d={
          role === "ambient"
            ? "M1 8.5 2.6 7l1.5 2.8L5.4 6l1.4 4.6L8.2 6.6l1.3 3 1.4-2.4 1.3 2 1.2-1.4 1.6.7"
            : "M1 8c1.8-7 3.4-7 4.7 0s3 7 4.6 0 3-7 4.7 0"
        }
      />
    </svg>
  );
}
