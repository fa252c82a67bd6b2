/** Draws the plain shapes of lib/charts as SVG. Colours are attributes, so no inline style is needed. */
import type { ReactNode } from "react";
import type { Fill, Shape } from "@/lib/charts/figure";
import { FONT_FIGURES, FONT_PROSE, toCss } from "@/lib/charts/tokens";

interface ShapesProps {
  shapes: readonly Shape[];
  /** Prefix of this figure's pattern ids; needed where shapes are filled with patterns. */
  patternId?: string;
}

export function Shapes({ shapes, patternId = "" }: ShapesProps): ReactNode {
  // Shapes of a figure are recomputed as a whole and never reordered: their place is their key.
  // oxlint-disable-next-line react/no-array-index-key
  return shapes.map((shape, at) => <ShapeOf key={at} shape={shape} patternId={patternId} />);
}

const toFill = (fill: Fill | undefined, patternId: string): string => {
  if (fill === undefined) return "none";
  return "pattern" in fill ? `url(#${patternId}${fill.pattern})` : toCss(fill);
};

function ShapeOf({ shape, patternId }: { shape: Shape; patternId: string }): ReactNode {
  const role = shape.role;
  if (shape.kind === "group") {
    const place =
      shape.x === undefined && shape.y === undefined
        ? ""
        : `translate(${shape.x ?? 0} ${shape.y ?? 0})`;
    const scale = shape.scale === undefined ? "" : ` scale(${shape.scale})`;
    return (
      <g data-role={role} data-band={shape.band} transform={`${place}${scale}`.trim() || undefined}>
        <Shapes shapes={shape.shapes} patternId={patternId} />
      </g>
    );
  }
  if (shape.kind === "text") {
    const halo =
      shape.halo === undefined
        ? {}
        : {
            stroke: toCss(shape.halo),
            strokeWidth: 4,
            strokeLinejoin: "round" as const,
            paintOrder: "stroke",
          };
    return (
      <text
        data-role={role}
        x={shape.x}
        y={shape.y}
        fontSize={shape.size}
        fontWeight={shape.weight ?? 400}
        fontFamily={shape.family === "prose" ? FONT_PROSE : FONT_FIGURES}
        letterSpacing={shape.tighten === undefined ? undefined : -shape.tighten}
        textAnchor={shape.anchor ?? "start"}
        fill={toCss(shape.fill)}
        {...halo}
      >
        {shape.text}
      </text>
    );
  }
  const pen = {
    "data-role": role,
    stroke: shape.stroke === undefined ? undefined : toCss(shape.stroke),
    strokeWidth: shape.stroke === undefined ? undefined : (shape.strokeWidth ?? 1),
    strokeDasharray: shape.dash?.join(" "),
  };
  if (shape.kind === "rect") {
    return (
      <rect
        {...pen}
        x={shape.x}
        y={shape.y}
        width={shape.width}
        height={shape.height}
        fill={toFill(shape.fill, patternId)}
        opacity={shape.opacity}
        shapeRendering={shape.crisp ? "crispEdges" : undefined}
      />
    );
  }
  if (shape.kind === "line") {
    return (
      <line
        {...pen}
        x1={shape.x1}
        y1={shape.y1}
        x2={shape.x2}
        y2={shape.y2}
        shapeRendering={shape.crisp ? "crispEdges" : undefined}
      />
    );
  }
  if (shape.kind === "circle") {
    return (
      <circle
        {...pen}
        cx={shape.cx}
        cy={shape.cy}
        r={shape.r}
        fill={toFill(shape.fill, patternId)}
      />
    );
  }
  return <path {...pen} d={shape.d} fill={toFill(shape.fill, patternId)} opacity={shape.opacity} />;
}
