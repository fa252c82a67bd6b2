"use client";

import { useState } from "react";
import { toMaxLevelNotice } from "@/lib/exposure/notices";
import { toNoticeSentence } from "@/lib/kit/notice-sentence";
import { Button } from "./button";
import { toFileFigure, toFileMethod, toPng, toSvgWithFonts, type FigureFile } from "./figure-file";
import { saveBlob, saveText } from "./save-text";
import { toTableCsv } from "./table-csv";
import type { ValuesColumn, ValuesRow } from "./values-grid";

interface FigureDownloadsProps {
  file: FigureFile;
  columns: readonly ValuesColumn[];
  rows: readonly ValuesRow[];
}

/** The figure as PNG and SVG, its table as CSV: each with the method line and the hearing notice. */
export function FigureDownloads({ file, columns, rows }: FigureDownloadsProps) {
  const [failed, setFailed] = useState("");
  const { stem, title, levelDb, criterion } = file;

  const save = async (kind: "png" | "svg"): Promise<void> => {
    setFailed("");
    try {
      const subject = readSubject();
      const figure = toFileFigure(file, subject);
      const svg = await toSvgWithFonts(figure, `${subject}: ${title}`);
      if (kind === "svg") saveText(`${stem}.svg`, "image/svg+xml", svg);
      else saveBlob(`${stem}.png`, await toPng(svg, figure));
    } catch (error) {
      setFailed(error instanceof Error ? error.message : "The file could not be made.");
    }
  };
  const saveCsv = (): void => {
    const notice =
      levelDb === null
        ? []
        : [toNoticeSentence(toMaxLevelNotice({ levelDb, distanceM: 1, mayPlayLouder: true }))];
    const comments = [`${readSubject()}: ${title}`, toFileMethod(criterion), ...notice];
    saveText(`${stem}.csv`, "text/csv", toTableCsv(columns, rows, comments));
  };

  return (
    <p className="mt-2 flex flex-wrap items-center gap-2">
      <span className="text-small">Download</span>
      <Button size="small" onClick={() => void save("png")}>
        PNG
      </Button>
      <Button size="small" onClick={() => void save("svg")}>
        SVG
      </Button>
      <Button size="small" onClick={saveCsv}>
        CSV
      </Button>
      <output className="text-small text-fault">{failed}</output>
    </p>
  );
}

/** The head of the page names the loudspeaker. */
const readSubject = (): string => document.querySelector("h1")?.textContent.trim() ?? "";
