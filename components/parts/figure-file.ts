/** A figure of a screen as a file: the same shapes, with fonts inside or as pixels. */
import type { CurveFigure } from "@/lib/charts/curve-figure";
import type { Figure } from "@/lib/charts/figure";
import { toStillFigure } from "@/lib/charts/still-figure";
import { toSvg } from "@/lib/charts/svg-text";
import type { TextLook } from "@/lib/charts/text-lines";
import { FONT_FIGURES, FONT_PROSE } from "@/lib/charts/tokens";
import { toMaxLevelNotice, toMethodLine } from "@/lib/exposure/notices";
import { frameFigure } from "@/lib/kit/framed-figure";

export interface FigureFile {
  /** Of the file: "output-limit". */
  stem: string;
  /** "output limit by band"; the loudspeaker's name comes before it. */
  title: string;
  /** The figure, in pieces as the screen lays them out; px. */
  parts: readonly { figure: Figure | CurveFigure; x: number; y: number }[];
  /** Highest level in it, dB SPL at 1 m; null where none is shown. */
  levelDb: number | null;
  /** "limit: 3 dB compression". */
  criterion?: string;
}

/** @param subject whose figure it is: "Osier 8A" */
export function toFileFigure(file: FigureFile, subject: string): Figure {
  const { levelDb, criterion, title } = file;
  return frameFigure(
    joinParts(file.parts),
    {
      title: subject === "" ? title : `${subject}: ${title}`,
      method: toFileMethod(criterion),
      notice:
        levelDb === null ? null : toMaxLevelNotice({ levelDb, distanceM: 1, mayPlayLouder: true }),
    },
    measureOnCanvas,
  );
}

export const toFileMethod = (criterion?: string): string =>
  `Levels at 1\u00a0m. ${toMethodLine(criterion)}`;

function joinParts(parts: FigureFile["parts"]): Figure {
  const drawn = parts.map(({ figure, x, y }) => ({
    figure: "shapes" in figure ? figure : toStillFigure(figure),
    x,
    y,
  }));
  const patterns = new Map(
    drawn.flatMap(({ figure }) => figure.patterns.map((one) => [one.name, one] as const)),
  );
  return {
    width: Math.max(...drawn.map(({ figure, x }) => x + figure.width)),
    height: Math.max(...drawn.map(({ figure, y }) => y + figure.height)),
    patterns: [...patterns.values()],
    shapes: drawn.map(({ figure, x, y }) => ({ kind: "group", x, y, shapes: figure.shapes })),
  };
}

let ruler: CanvasRenderingContext2D | null = null;

function measureOnCanvas(text: string, { size, weight = 400, family }: TextLook): number {
  ruler ??= document.createElement("canvas").getContext("2d");
  if (ruler === null) return text.length * size * 0.6;
  ruler.font = `${weight} ${size}px ${family === "prose" ? FONT_PROSE : FONT_FIGURES}`;
  return ruler.measureText(text).width;
}

/** What a figure's letters are drawn with; one file of it for every weight. */
const FACES = [
  {
    family: "Atkinson Hyperlegible Next Variable",
    weight: "200 800",
    file: "atkinson-hyperlegible-next.woff2",
  },
  { family: "Roboto Mono", weight: "400", file: "roboto-mono-400.woff2" },
  { family: "Roboto Mono", weight: "500 700", file: "roboto-mono-600.woff2" },
] as const;

/** @returns an SVG that brings its fonts along. */
export async function toSvgWithFonts(figure: Figure, label: string): Promise<string> {
  const faces = await Promise.all(
    FACES.map(async ({ family, weight, file }) => {
      const answer = await fetch(`/fonts/${file}`);
      if (!answer.ok) throw new Error(`The font ${file} could not be read.`);
      const bytes = new Uint8Array(await answer.arrayBuffer());
      return `@font-face{font-family:"${family}";font-weight:${weight};src:url(data:font/woff2;base64,${toBase64(bytes)}) format("woff2")}`;
    }),
  );
  const { text } = toSvg(figure, { id: "f", label, toColour: (paint) => paint.light });
  const open = text.indexOf(">") + 1;
  return `${text.slice(0, open)}<style>${faces.join("")}</style>${text.slice(open)}\n`;
}

function toBase64(bytes: Uint8Array): string {
  let text = "";
  for (const byte of bytes) text += String.fromCodePoint(byte);
  return btoa(text);
}

const PIXELS_PER_PX = 2;

/** @returns the picture of an SVG at twice its size. */
export async function toPng(svg: string, { width, height }: Figure): Promise<Blob> {
  const address = URL.createObjectURL(new Blob([svg], { type: "image/svg+xml" }));
  try {
    const image = new Image(width, height);
    image.src = address;
    await image.decode();
    const canvas = document.createElement("canvas");
    canvas.width = Math.ceil(width * PIXELS_PER_PX);
    canvas.height = Math.ceil(height * PIXELS_PER_PX);
    canvas.getContext("2d")?.drawImage(image, 0, 0, canvas.width, canvas.height);
    return await new Promise((resolve, reject) => {
      canvas.toBlob(
        (blob) =>
          blob === null ? reject(new Error("The picture could not be made.")) : resolve(blob),
        "image/png",
      );
    });
  } finally {
    URL.revokeObjectURL(address);
  }
}
