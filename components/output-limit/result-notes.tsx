import type { Result } from "@/lib/result/result-schema";
import { toShapeSentence } from "@/lib/result/finding";

/** Below the figure: the loss of each louder run in two figures, and what the engine warns of. */
export function ResultNotes({ result }: { result: Result }) {
  const lowest = Math.min(...result.runs.map((run) => run.level_dB));
  const shapes = result.shape.filter(
    (shape) => shape.level_dB > lowest || shape.kind === "long-term",
  );
  return (
    <div className="mt-5 grid gap-x-10 gap-y-5 lg:grid-cols-2">
      <section aria-label="Loss of each run">
        <h2 className="text-[15px]/[22px]">Loss of each run</h2>
        <ul className="mt-1 text-small">
          {shapes.map((shape) => (
            <li key={shape.file} className="border-b border-rule py-1.5">
              {toShapeSentence(shape)}
            </li>
          ))}
        </ul>
      </section>
      {result.warnings.length > 0 && (
        <section aria-label="What the analysis warns of">
          <h2 className="text-[15px]/[22px]">What the analysis warns of</h2>
          <ul className="mt-1 text-small">
            {result.warnings.map((warning) => (
              <li
                key={`${warning.code}${warning.file ?? ""}${warning.message}`}
                className="border-b border-rule py-1.5"
              >
                {warning.message}
                {warning.file !== undefined && (
                  <span className="figures ml-2 text-label text-ink-2">{warning.file}</span>
                )}
              </li>
            ))}
          </ul>
        </section>
      )}
    </div>
  );
}
