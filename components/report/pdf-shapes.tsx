/** Draws the plain shapes of lib/charts into a PDF, in the light theme on a white sheet. */
import { Circle, G, Line, Path, Rect, Svg } from "@react-pdf/renderer";
import type { ReactNode } from "react";
import type { Figure, Fill, Shape } from "@/lib/charts/figure";
import { COLOURS, type Paint } from "@/lib/charts/tokens";

const PAPER = "#FFFFFF";

export const toInk = (paint: Paint): string =>
  paint.light === COLOURS.sheet.light ? PAPER : paint.light;

/** @param figure without patterns and without text: hatches drawn, letters as outlines */
export function PdfFigure({ figure, widthPt }: { figure: Figure; widthPt: number }) {
  return (
    <Svg
      width={widthPt}
      height={(widthPt * figure.height) / figure.width}
      viewBox={`0 0 ${figure.width} ${figure.height}`}
    >
      <PdfShapes shapes={figure.shapes} />
    </Svg>
  );
}

function PdfShapes({ shapes }: { shapes: readonly Shape[] }): ReactNode {
  // A page is drawn once: the place of a shape is its key.
  // oxlint-disable-next-line react/no-array-index-key
  return shapes.map((shape, at) => <PdfShape key={at} shape={shape} />);
}

function toFill(fill: Fill | undefined): string {
  if (fill === undefined) return "none";
  if ("pattern" in fill) throw new RangeError(`print knows no pattern "${fill.pattern}"`);
  return toInk(fill);
}

function PdfShape({ shape }: { shape: Shape }): ReactNode {
  if (shape.kind === "text") throw new RangeError(`print takes outlines, not "${shape.text}"`);
  if (shape.kind === "group") {
    const { x = 0, y = 0, scale } = shape;
    const scaled = scale === undefined ? "" : ` scale(${scale})`;
    return (
      <G transform={`translate(${x}, ${y})${scaled}`}>
        <PdfShapes shapes={shape.shapes} />
      </G>
    );
  }
  const pen =
    shape.stroke === undefined
      ? {}
      : {
          stroke: toInk(shape.stroke),
          strokeWidth: shape.strokeWidth ?? 1,
          ...(shape.dash === undefined ? {} : { strokeDasharray: shape.dash.join(" ") }),
        };
  if (shape.kind === "line") {
    return <Line {...pen} x1={shape.x1} x2={shape.x2} y1={shape.y1} y2={shape.y2} />;
  }
  const fill = toFill(shape.fill);
  if (shape.kind === "rect") {
    const { x, y, width, height } = shape;
    return <Rect {...pen} fill={fill} x={x} y={y} width={width} height={height} />;
  }
  if (shape.kind === "circle") {
    return <Circle {...pen} fill={fill} cx={shape.cx} cy={shape.cy} r={shape.r} />;
  }
  return <Path {...pen} fill={fill} d={shape.d} />;
}
