"use client";

import dynamic from "next/dynamic";
import type { ReactNode } from "react";
import { computedCause } from "@/lib/charts/band-columns";
import { formatFrequency } from "@/lib/charts/format";
import {
  toEvidenceLines,
  toFindingSentence,
  toLongTermSentences,
  toNextRunSentence,
} from "@/lib/result/finding";
import { chooseLimit, findUsableTopHz } from "@/lib/result/choose-limit";
import type { Band, Result } from "@/lib/result/result-schema";
import type { Criterion } from "@/lib/series/series-schema";
import { CauseLabel } from "../parts/cause-mark";
import { HarmonicsTable } from "./harmonics-table";

/** Read by few, and not at first sight: it comes after the page. */
const SplUncertainty = dynamic(() => import("./spl-uncertainty").then((m) => m.SplUncertainty));

interface BandDetailProps {
  result: Result;
  band: Band;
  criterion: Criterion;
  onMove: (nominalHz: number) => void;
  /** The input/output figure of this band. */
  figure: ReactNode;
  /** What a person decides here; left out where nothing can be decided. */
  decision?: ReactNode;
}

/** The selected band: finding first, then the figure and the evidence behind it. */
export function BandDetail({ result, band, criterion, onMove, figure, decision }: BandDetailProps) {
  const at = result.bands.findIndex((one) => one.nominal_Hz === band.nominal_Hz);
  const limit = chooseLimit(band, criterion, { usableTopHz: findUsableTopHz(result) });
  const nextRun = toNextRunSentence(band);
  const longTerm = toLongTermSentences(band);
  const variants = band.levels.filter((level) => level.variant !== undefined);
  return (
    <section aria-label={`Band ${formatFrequency(band.nominal_Hz)}`} className="min-w-0">
      <div className="flex items-center justify-between gap-3">
        <h2 className="text-overprint">{formatFrequency(band.nominal_Hz)} band</h2>
        <span className="flex gap-1.5">
          <Step to={result.bands[at - 1]} onMove={onMove} words="Band below" d="M9 2 4 7l5 5" />
          <Step to={result.bands[at + 1]} onMove={onMove} words="Band above" d="M5 2l5 5-5 5" />
        </span>
      </div>
      <p className="mt-1.5 text-finding">
        {toFindingSentence(band).map((part) =>
          part.strong === true ? <b key={part.text}>{part.text}</b> : part.text,
        )}
      </p>
      <div className="mt-3 border-b border-rule pb-3">{figure}</div>
      {nextRun !== null && (
        <p className="border-b border-rule py-2 text-small text-ink-2">{nextRun}</p>
      )}
      <div className="border-b border-rule py-3">
        <h3 className="flex flex-wrap items-baseline justify-between gap-x-4">
          <CauseLabel cause={computedCause(band, limit)} />
          <span className="figures text-label font-normal text-ink-2">
            computed{band.cause_inferred ? ", inferred from its neighbours" : ""}
          </span>
        </h3>
        {band.cause_reason !== "" && <p className="mt-1 text-small">{band.cause_reason}</p>}
        <EvidenceList band={band} />
      </div>
      {longTerm.length > 0 && (
        <div className="border-b border-rule py-3">
          <h3>Long-term</h3>
          <ul className="mt-1 text-small">
            {longTerm.map((sentence) => (
              <li key={sentence}>{sentence}</li>
            ))}
          </ul>
        </div>
      )}
      {variants.length > 0 && <VariantList variants={variants} />}
      <SplUncertainty band={band} />
      <div className="py-3">
        <HarmonicsTable band={band} />
      </div>
      {decision}
    </section>
  );
}

interface StepProps {
  to: Band | undefined;
  onMove: (nominalHz: number) => void;
  words: string;
  d: string;
}

function Step({ to, onMove, words, d }: StepProps) {
  return (
    <button
      type="button"
      aria-label={to === undefined ? words : `${words}: ${formatFrequency(to.nominal_Hz)}`}
      disabled={to === undefined}
      onClick={() => to !== undefined && onMove(to.nominal_Hz)}
      className="grid size-[34px] place-items-center rounded-control border border-edge bg-sheet hover:bg-wash disabled:border-dashed disabled:text-ink-3 max-md:size-11"
    >
      <svg width="14" height="14" viewBox="0 0 14 14" aria-hidden="true">
        <path d={d} fill="none" stroke="currentColor" strokeWidth="2" />
      </svg>
    </button>
  );
}

function EvidenceList({ band }: { band: Band }) {
  const lines = toEvidenceLines(band);
  if (lines.length === 0) return null;
  return (
    <dl className="mt-2 grid grid-cols-[minmax(0,1fr)_auto] gap-x-4 gap-y-1 text-small">
      {lines.map((line) => (
        <div key={line.name} className="contents">
          <dt className="text-ink-2">
            {line.name}
            {line.means !== "" && <span className="block text-label">{line.means}</span>}
          </dt>
          <dd className="figures text-right text-figure">{line.value}</dd>
        </div>
      ))}
    </dl>
  );
}

/** Variant runs stand beside the plain ones as evidence and are never mixed into them. */
function VariantList({ variants }: { variants: Band["levels"] }) {
  return (
    <div className="border-b border-rule py-3">
      <h3>Variant runs</h3>
      <ul className="mt-1 text-small">
        {variants.map((level) => (
          <li key={`${level.file}${level.variant}`} className="flex justify-between gap-4">
            <span>
              {level.level_dB} dB, {level.variant}
            </span>
            <span className="figures text-figure">
              {level.compression_dB === null
                ? "in the noise"
                : `${level.compression_dB < 0 ? "−" : "+"}${Math.abs(level.compression_dB).toFixed(1)} dB compression`}
            </span>
          </li>
        ))}
      </ul>
    </div>
  );
}
