import type { CheckReport } from "@/lib/checks/report";
import { DOCUMENTS, EVIDENCE } from "@/lib/checks/sources";
import { Brand } from "../frame/brand";
import { CheckTable } from "./check-table";
import { MeasuringSteps } from "./measuring-steps";

const SECTION = "mt-16 text-[34px]/10 font-[660] tracking-[-0.015em] max-md:text-[26px]/8";
const LEAD = "mt-2 max-w-[66ch] text-[17px]/[27px] text-ink-2";

const NOT_CLAIMED = [
  "Not a conformity test to any standard named on this page. Standards were read through public transcriptions; where that is so, the list of sources says it.",
  "One unit is measured. Another may differ. The uncertainty stated (k = 2) is for the unit on the stand.",
  "Rooms are taken into the seat estimate by one working value each: 0.6 m, 1 m and 2 m for a small, a live and a large room. It is common practice and has no published source.",
  "The allowance of WHO–ITU H.870 was written for personal audio devices; we apply it to loudspeakers. An estimate, not medical advice. Local rules at work and qualified professionals decide.",
];

/** The method in plain words, then everything it was held against. Needs no script and no account. */
export function HowWeMeasure({ report }: { report: CheckReport }) {
  return (
    <div className="min-h-dvh bg-sheet px-[84px] max-lg:px-phone">
      <header className="flex h-16 items-center">
        <Brand size={28} />
      </header>
      <main className="pt-[34px] pb-[70px] max-md:pt-4">
        <h1 className="text-hero max-md:text-[32px]/9">How we measure, and how we check it</h1>
        <p className={LEAD}>
          A loudspeaker is played a slow rising tone at several levels, each an exact step louder
          than the one before. Where the sound stops keeping step, or the distortion grows too far,
          it has reached its limit in that part of the range.
        </p>
        <MeasuringSteps />
        <h2 className={SECTION}>Checks against published values</h2>
        <p className={LEAD}>
          {report.agreeing} of {report.total} agree. The figures are computed anew with every
          release by the same code that analyses the tests; this is engine {report.engine}.
        </p>
        <CheckTable subjects={report.subjects} />
        <Sources />
        <h2 className={SECTION}>What these tests are not</h2>
        <div className="mt-3.5 gap-16 text-[16px]/6 md:columns-2">
          {NOT_CLAIMED.map((text) => (
            <p key={text} className="mb-3.5 break-inside-avoid">
              {text}
            </p>
          ))}
        </div>
      </main>
    </div>
  );
}

function Sources() {
  return (
    <>
      <h2 className={SECTION}>How each value is known</h2>
      <p className={LEAD}>The letter in brackets says it.</p>
      <dl className="mt-3 grid grid-cols-[auto_minmax(0,1fr)] gap-x-4 gap-y-1 text-[16px]/6">
        {[...Object.entries(EVIDENCE), ...Object.entries(DOCUMENTS)].map(([mark, words]) => (
          <div key={mark} className="contents">
            <dt className="figures text-[15px]">{mark}</dt>
            <dd>{words}</dd>
          </div>
        ))}
      </dl>
    </>
  );
}
