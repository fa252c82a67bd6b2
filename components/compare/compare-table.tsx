import { NBSP } from "@/lib/charts/format";
import { CAUSE_WORDS } from "@/lib/charts/marks";
import {
  toFirstLines,
  toPartLines,
  toReachedLines,
  type TwoLines,
} from "@/lib/compare/compare-words";
import type { ComparisonTest } from "@/lib/compare/comparison-schema";
import { toRange } from "@/lib/reader/parts-of-sound";
import { CauseMark } from "../parts/cause-mark";
import { Table, TableFrame, Td, Th } from "../parts/table";
import { LetterBox } from "./letter-box";

/** What each loudspeaker reached, by part of the sound, and where it gives out first. */
export function CompareTable({ tests }: { tests: readonly ComparisonTest[] }) {
  const names = [...new Set(tests.flatMap((test) => test.parts.map((part) => part.name)))];
  return (
    <TableFrame label="By part of the sound" className="mx-gutter mt-4 max-md:mx-phone">
      <Table className="border-x-0">
        <caption className="sr-only">Limits by part of the sound, dB SPL at 1 m</caption>
        <thead>
          <tr>
            <Th>Loudspeaker</Th>
            <Th>Reached at 1{NBSP}m, dB</Th>
            {names.map((name) => (
              <Th key={name}>
                {name}, dB
                <small className="block text-label font-normal">{rangeOf(tests, name)}</small>
              </Th>
            ))}
            <Th>
              Gives out first
              <small className="block text-label font-normal">
                lowest drive, with the run level
              </small>
            </Th>
          </tr>
        </thead>
        <tbody>
          {tests.map((test, at) => (
            <tr key={test.id} className="h-[50px]">
              <th scope="row" className="border-t border-rule py-2 pr-2.5 pl-4 text-left">
                <span className="flex items-center gap-2.5 font-[640] whitespace-nowrap">
                  <LetterBox at={at} />
                  {test.model}
                </span>
              </th>
              <Td figures>
                <Lines lines={toReachedLines(test)} plain={test.reached === null} />
              </Td>
              {names.map((name) => {
                const part = test.parts.find((one) => one.name === name);
                return (
                  <Td key={name} figures>
                    {part === undefined ? (
                      <span className="text-label text-ink-2">not assessed</span>
                    ) : (
                      <Lines lines={toPartLines(part)} plain={part.reached_dB === null} />
                    )}
                  </Td>
                );
              })}
              <Td figures>
                <span className="grid grid-cols-[auto_1fr] gap-x-1.5">
                  {test.first !== null && (
                    <CauseMark cause={test.first.cause} label={CAUSE_WORDS[test.first.cause]} />
                  )}
                  <FirstWords lines={toFirstLines(test)} />
                </span>
              </Td>
            </tr>
          ))}
        </tbody>
      </Table>
    </TableFrame>
  );
}

function Lines({ lines, plain }: { lines: TwoLines; plain: boolean }) {
  return (
    <>
      <span className={plain ? "text-label text-ink-2" : "text-[15px]/5 font-medium"}>
        {lines.atLeast && <span className="font-normal text-ink-2">at least </span>}
        {lines.words}
      </span>
      {lines.note !== null && (
        <span className="block max-w-52 text-label whitespace-normal text-ink-2">{lines.note}</span>
      )}
    </>
  );
}

function FirstWords({ lines }: { lines: TwoLines }) {
  return (
    <>
      <span className="col-start-2 text-figure">{lines.words}</span>
      {lines.note !== null && (
        <span className="col-start-2 text-label text-ink-2">{lines.note}</span>
      )}
    </>
  );
}

function rangeOf(tests: readonly ComparisonTest[], name: string): string {
  const parts = tests.flatMap((test) => test.parts.filter((part) => part.name === name));
  const [from, to] = [
    Math.min(...parts.map((part) => part.from_Hz)),
    Math.max(...parts.map((part) => part.to_Hz)),
  ];
  return toRange(from, to);
}
