/** The report: one page, A4 or Letter, drawn from the snapshot alone. */
import { Document, Page, renderToBuffer, StyleSheet, Text, View } from "@react-pdf/renderer";
import type { ReactNode } from "react";
import { MAP_ROW } from "@/lib/charts/compression-map";
import type { Figure } from "@/lib/charts/figure";
import { COLOURS } from "@/lib/charts/tokens";
import { alertShapes, brandShapes, SAFETY } from "@/lib/kit/brand-shapes";
import { toAltText, toName } from "@/lib/kit/kit-words";
import { wrapText } from "@/lib/charts/text-lines";
import { measureText } from "@/lib/kit/outlines";
import { toPublishedMapRows, toReportFigure } from "@/lib/kit/report-figure";
import {
  toCaption,
  toLongTermHead,
  toMusicWords,
  toReportFacts,
  toReportMethod,
  toReportParts,
} from "@/lib/kit/report-words";
import { toStandingSentence, type Standing } from "@/lib/kit/standing";
import type { Snapshot } from "@/lib/publication/snapshot-schema";
import { toAnswer, toMethodWords, toPublishedNotice } from "@/lib/reader/page-words";
import { PdfFigure, toInk } from "./pdf-shapes";
import { FIGURES, PROSE, registerFonts, toPrintable } from "./report-fonts";

export const PAPERS = ["a4", "letter"] as const;
export type Paper = (typeof PAPERS)[number];

interface ReportProps {
  snapshot: Snapshot;
  standing: Standing;
  /** Absolute address of the revision's page. */
  page: string;
  paper: Paper;
}

/** Width in points, and px for the plot of a report with usual words: one line less for each line more. */
const SHEETS: Record<Paper, { size: "A4" | "LETTER"; width: number; plotPx: number }> = {
  a4: { size: "A4", width: 595.28, plotPx: 214 },
  letter: { size: "LETTER", width: 612, plotPx: 154 },
};
const LEAST_PLOT_PX = 30;
const USUAL = { answer: 2, text: 8, mapRows: 4 };
const COLUMN_GAP = 22;
const FACT_NAME = 66;
const TEXT_LEADING = 1.38;
const MARGIN = 30;
const TEXT_PT = 8.4;
const ANSWER_PT = 15.5;
const ANSWER_STEP = 19;
const PX_PER_PT = 4 / 3;

/** @returns the bytes of a PDF of one page. */
export function drawReport(props: ReportProps): Promise<Uint8Array> {
  registerFonts();
  return renderToBuffer(<Report {...props} />);
}

const ink = toInk(COLOURS.ink);
const ink2 = toInk(COLOURS.ink2);
const rule = toInk(COLOURS.rule);
const styles = StyleSheet.create({
  page: { padding: MARGIN, paddingBottom: 24, fontFamily: PROSE, fontSize: TEXT_PT, color: ink },
  row: { flexDirection: "row" },
  head: {
    flexDirection: "row",
    alignItems: "center",
    paddingBottom: 7,
    marginBottom: 9,
    borderBottom: `1pt solid ${ink}`,
  },
  brand: { fontSize: 11, fontWeight: 700, marginLeft: 5, flexGrow: 1 },
  figures: { fontFamily: FIGURES, color: ink2, fontSize: 8 },
  name: { fontSize: 9.5, color: ink2, marginBottom: 2 },
  bold: { fontWeight: 700, color: ink },
  standing: { fontWeight: 700, color: toInk(COLOURS.fault), marginBottom: 2 },
  answer: { fontSize: ANSWER_PT, lineHeight: ANSWER_STEP / ANSWER_PT, fontWeight: 700 },
  method: { color: ink2, marginTop: 3, marginBottom: 6 },
  caption: { color: ink2, marginTop: 2, marginBottom: 4, fontSize: TEXT_PT, lineHeight: 1.3 },
  cells: { flexDirection: "row", borderBottom: `0.5pt solid ${rule}`, paddingVertical: 2.5 },
  heads: { flexDirection: "row", borderBottom: `1pt solid ${ink}`, paddingBottom: 3 },
  notice: { flexDirection: "row", border: "1pt solid #000000", marginVertical: 7 },
  signal: {
    flexDirection: "row",
    alignItems: "center",
    justifyContent: "center",
    width: 92,
    borderRight: "1pt solid #000000",
  },
  signalWord: { fontWeight: 700, fontSize: 10, color: "#000000", marginLeft: 5 },
  noticeWords: { flex: 1, padding: 6, color: "#000000" },
  noticeText: { fontSize: 8.8, lineHeight: 1.35 },
  column: { flex: 1 },
  title: { fontSize: 9.5, fontWeight: 700, marginBottom: 2 },
  prose: { fontSize: TEXT_PT, lineHeight: TEXT_LEADING },
  foot: {
    position: "absolute",
    left: MARGIN,
    right: MARGIN,
    bottom: 20,
    paddingTop: 5,
    borderTop: `0.5pt solid ${rule}`,
    flexDirection: "row",
    justifyContent: "space-between",
  },
});

function Report({ snapshot, standing, page, paper }: ReportProps) {
  const sheet = SHEETS[paper];
  const room = sheet.width - 2 * MARGIN;
  const { loudspeaker, series, revision } = snapshot;
  const { maker, model, kind, serial } = loudspeaker;
  const sentence = toStandingSentence(revision, standing);
  const answer = toAnswer(snapshot).map(toPrintable);
  const unit = [kind, serial === "" ? "" : `unit ${serial}`].filter((one) => one !== "");
  return (
    <Document
      title={toPrintable(`${toName(snapshot)}: how loud it plays`)}
      author={toPrintable(snapshot.lab.name)}
      subject={toPrintable(toAltText(snapshot))}
      creator="Tidemark"
      producer="Tidemark"
      language="en-GB"
      creationDate={new Date(snapshot.published_at)}
      modificationDate={new Date(snapshot.published_at)}
    >
      <Page size={sheet.size} style={styles.page}>
        <View style={styles.head}>
          <PdfFigure figure={toSquare(32, brandShapes())} widthPt={15} />
          <Text style={styles.brand}>Tidemark</Text>
          <Text style={styles.figures}>
            {toPrintable(`Output-limit report · series ${series.number} · revision ${revision}`)}
          </Text>
        </View>
        <Text style={styles.name}>
          <Text style={styles.bold}>{toPrintable(model)}</Text>
          {toPrintable([maker === "" ? "" : ` by ${maker}`, ...unit].join(" · "))}
        </Text>
        {sentence !== null && <Text style={styles.standing}>{toPrintable(sentence)}</Text>}
        {answer.map((one, at) => (
          <Text key={one} style={[styles.answer, { color: at === 0 ? ink : ink2 }]}>
            {one}
          </Text>
        ))}
        <Text style={styles.method}>{toPrintable(toMethodWords(snapshot))}</Text>
        <PdfFigure
          figure={toReportFigure(snapshot, {
            width: room * PX_PER_PT,
            plotHeight: toPlotPx({ snapshot, standing, page, paper }),
          })}
          widthPt={room}
        />
        <Text style={styles.caption}>{toCaption(snapshot)}</Text>
        <Parts snapshot={snapshot} />
        <Notice snapshot={snapshot} />
        <View style={[styles.row, { gap: COLUMN_GAP, marginTop: 4 }]}>
          <View style={styles.column}>
            <Text style={styles.title}>Method</Text>
            <Text style={styles.prose}>{toReportMethod(snapshot)}</Text>
          </View>
          <View style={styles.column}>
            <Text style={styles.title}>Source</Text>
            {toReportFacts(snapshot, standing.timeZone).map(([name, words]) => (
              <View key={name} style={styles.row}>
                <Text style={[styles.figures, styles.prose, { width: FACT_NAME }]}>{name}</Text>
                <Text style={[styles.prose, { flex: 1 }]}>{toPrintable(words)}</Text>
              </View>
            ))}
          </View>
        </View>
        <View style={styles.foot} fixed>
          <Text style={styles.figures}>{page}</Text>
          <Text style={styles.figures}>Page 1 of 1</Text>
        </View>
      </Page>
    </Document>
  );
}

/** Whatever needs more room than usual takes it from the plot, so that the report stays one page. */
function toPlotPx({ snapshot, standing, paper }: ReportProps): number {
  const { width, plotPx } = SHEETS[paper];
  const room = width - 2 * MARGIN;
  const column = (room - COLUMN_GAP) / 2;
  const count = (text: string, size: number, px: number, weight: 400 | 700 = 400): number =>
    wrapText(text, px, (line) => measureText(line, { family: "prose", weight, size })).length;
  const answer = toAnswer(snapshot).reduce((sum, one) => sum + count(one, ANSWER_PT, room, 700), 0);
  const method = count(toReportMethod(snapshot), TEXT_PT, column);
  const facts = toReportFacts(snapshot, standing.timeZone).reduce(
    (sum, [, words]) => sum + count(words, TEXT_PT, column - FACT_NAME),
    0,
  );
  const sentence = toStandingSentence(snapshot.revision, standing);
  const said = sentence === null ? 0 : count(sentence, TEXT_PT, room, 700);
  const extraPt =
    Math.max(0, answer - USUAL.answer) * ANSWER_STEP +
    (Math.max(0, Math.max(method, facts) - USUAL.text) + said) * TEXT_PT * TEXT_LEADING;
  const extraRows = Math.max(0, toPublishedMapRows(snapshot).length - USUAL.mapRows);
  return Math.max(LEAST_PLOT_PX, Math.floor(plotPx - extraPt * PX_PER_PT - extraRows * MAP_ROW));
}

const toSquare = (size: number, shapes: Figure["shapes"]): Figure => ({
  width: size,
  height: size,
  patterns: [],
  shapes,
});

const WIDTHS = ["18%", "20%", "18%", "24%", "20%"] as const;

function Cells({ cells, head = false }: { cells: readonly ReactNode[]; head?: boolean }) {
  return (
    <View style={head ? styles.heads : styles.cells}>
      {WIDTHS.map((width, at) => (
        <Text
          key={width + String(at)}
          style={[
            head || at > 0 ? { ...styles.figures, color: head ? ink2 : ink } : styles.bold,
            { width },
          ]}
        >
          {cells[at]}
        </Text>
      ))}
    </View>
  );
}

function Parts({ snapshot }: { snapshot: Snapshot }) {
  return (
    <View>
      <Cells
        head
        cells={[
          "Part of the sound",
          "Bands",
          "Reached, at 1\u00a0m",
          "Held back by",
          toLongTermHead(snapshot),
        ]}
      />
      {toReportParts(snapshot).map((part) => (
        <Cells
          key={part.name}
          cells={[part.name, part.range, part.reached, part.heldBy, part.longTerm]}
        />
      ))}
    </View>
  );
}

function Notice({ snapshot }: { snapshot: Snapshot }) {
  const notice = toPublishedNotice(snapshot);
  if (notice === null) return null;
  return (
    <View style={styles.notice}>
      <View style={[styles.signal, { backgroundColor: SAFETY[notice.signal].light }]}>
        <PdfFigure figure={toSquare(24, alertShapes(notice.signal))} widthPt={15} />
        <Text style={styles.signalWord}>{notice.signal}</Text>
      </View>
      <View style={styles.noticeWords}>
        <Text style={[styles.noticeText, { fontWeight: 700 }]}>
          {notice.lead} {notice.text}
        </Text>
        <Text style={styles.noticeText}>{toMusicWords(snapshot)}</Text>
      </View>
    </View>
  );
}
