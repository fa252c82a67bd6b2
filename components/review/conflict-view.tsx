"use client";

import { useState } from "react";
import { formatFrequency } from "@/lib/charts/format";
import { CAUSE_WORDS } from "@/lib/charts/marks";
import type { Band } from "@/lib/result/result-schema";
import { needsReason, SHORTEST_REASON } from "@/lib/review/decide";
import type { DecisionCause } from "@/lib/review/review-schema";
import { toClock } from "@/lib/time/time-words";
import { useLabZone } from "../frame/lab-session";
import { Button } from "../parts/button";
import { CauseMark } from "../parts/cause-mark";
import { Field, TextInput } from "../parts/field";
import { joinClasses } from "../parts/join-classes";
import type { Conflict } from "./decision-outbox";

interface ConflictViewProps {
  conflict: Conflict;
  bands: readonly Band[];
  onKeepTheirs: () => void;
  onTakeMine: (reason: string | null) => void;
}

/** Two people decided the same band: both are shown, and both stay in the history. */
export function ConflictView({ conflict, bands, onKeepTheirs, onTakeMine }: ConflictViewProps) {
  const zone = useLabZone();
  const { mine, theirs, atMs } = conflict;
  const pairs = theirs.map((their) => ({
    their,
    own: mine.find((one) => one.nominal_Hz === their.nominal_Hz),
  }));
  const [reason, setReason] = useState(
    () => pairs.find(({ own }) => own?.reason != null)?.own?.reason ?? "",
  );
  const [fault, setFault] = useState<string>();
  const needed = pairs.some(({ own }) => {
    const band = bands.find((one) => one.nominal_Hz === own?.nominal_Hz);
    return own !== undefined && band !== undefined && needsReason(band, own.cause);
  });
  const names = theirs.map((their) => formatFrequency(their.nominal_Hz));
  const takeMine = (): void => {
    const words = reason.trim();
    if (needed && words.length < SHORTEST_REASON) {
      setFault("Give a reason.");
      return;
    }
    onTakeMine(words === "" ? null : words);
  };
  return (
    <section
      role="alert"
      aria-label="Decided by two people"
      className="mt-4 border border-rule bg-sheet px-6 py-5 max-md:px-phone"
    >
      <h2 className="text-section">
        {names.length === 1
          ? `${names[0]} was decided while you were looking`
          : `${names.length} bands were decided while you were looking`}
      </h2>
      {pairs.map(({ their, own }) => (
        <div key={their.nominal_Hz} className="mt-3">
          {names.length > 1 && (
            <p className="figures mb-1 text-label">{formatFrequency(their.nominal_Hz)}</p>
          )}
          <div className="grid gap-2.5 sm:grid-cols-2">
            <Side
              who={`${their.by.name}, ${toClock(their.at, zone)}`}
              cause={their.cause}
              reason={their.reason}
            />
            <Side
              own
              who={`yours, ${toClock(new Date(atMs), zone)}`}
              cause={own?.cause ?? null}
              reason={own?.reason ?? null}
            />
          </div>
        </div>
      ))}
      <Field className="mt-3 max-w-prose" label="reason for yours" error={fault}>
        {(control) => (
          <TextInput
            {...control}
            size="normal"
            maxLength={500}
            value={reason}
            onChange={(event) => {
              setReason(event.target.value);
              setFault(undefined);
            }}
          />
        )}
      </Field>
      <div className="mt-3 flex flex-wrap gap-2.5">
        <Button onClick={onKeepTheirs}>Keep theirs</Button>
        <Button tone="decision" onClick={takeMine}>
          Use mine, with a reason
        </Button>
      </div>
      <p className="mt-2 text-small text-ink-2">Both stay in the history whichever is kept.</p>
    </section>
  );
}

interface SideProps {
  who: string;
  cause: DecisionCause | null;
  reason: string | null;
  own?: boolean;
}

function Side({ who, cause, reason, own = false }: SideProps) {
  return (
    <div
      className={joinClasses(
        "border px-3 py-2.5",
        own ? "border-2 border-overprint px-[11px]" : "border-edge",
      )}
    >
      <p className="figures text-label text-ink-2">{who}</p>
      <p className="mt-1 flex items-center gap-2">
        {cause === null ? (
          "open again"
        ) : (
          <>
            <CauseMark cause={cause} ink={own ? "overprint" : "ink"} /> {CAUSE_WORDS[cause]}
          </>
        )}
      </p>
      <p className="mt-0.5 text-small">{reason ?? "No reason given."}</p>
    </div>
  );
}
