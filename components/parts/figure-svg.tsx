import { useId, type ReactNode } from "react";
import type { Figure } from "@/lib/charts/figure";
import { toCss } from "@/lib/charts/tokens";
import { Shapes } from "./shapes";

interface FigureSvgProps {
  figure: Figure;
  /** One sentence with the finding; left out where the figure is hidden because words or a table stand beside it. */
  label?: string;
  /** Laid over the figure: selection, targets. */
  children?: ReactNode;
  className?: string;
}

/** A figure of lib/charts as SVG, at its own size. */
export function FigureSvg({ figure, label, children, className }: FigureSvgProps) {
  const id = useId().replaceAll(/[^\w-]/g, "");
  const size = {
    width: figure.width,
    height: figure.height,
    viewBox: `0 0 ${figure.width} ${figure.height}`,
  };
  const content = (
    <>
      <defs>
        {figure.patterns.map((pattern) => (
          <pattern
            key={pattern.name}
            id={`${id}${pattern.name}`}
            width={pattern.pitch}
            height={pattern.pitch}
            patternUnits="userSpaceOnUse"
            patternTransform={pattern.turn === 0 ? undefined : `rotate(${pattern.turn})`}
          >
            <rect width={pattern.pitch} height={pattern.pitch} fill={toCss(pattern.ground)} />
            <path
              d={`M${pattern.offset} 0V${pattern.pitch}`}
              stroke={toCss(pattern.line)}
              strokeWidth={pattern.width}
            />
          </pattern>
        ))}
      </defs>
      <Shapes shapes={figure.shapes} patternId={id} />
      {children}
    </>
  );
  const classes = `block flex-none overflow-visible ${className ?? ""}`;
  return label === undefined ? (
    <svg {...size} className={classes} aria-hidden={children === undefined ? true : undefined}>
      {content}
    </svg>
  ) : (
    <svg {...size} className={classes} role="img" aria-label={label}>
      {content}
    </svg>
  );
}
