/** A figure as the text of an SVG, for pages and files that no component draws. */
import { asHtml, escapeHtml, type Html } from "../html/html";
import type { Figure, Fill, Shape } from "./figure";
import { FONT_FIGURES, FONT_PROSE, toCss, type Paint } from "./tokens";

interface SvgOptions {
  /** Prefix of the pattern ids: no two figures of a page share one. */
  id: string;
  /** One sentence with the finding; left out where words beside the figure say it. */
  label?: string;
  className?: string;
  /** How a colour is written; by default it follows the page's colour scheme. */
  toColour?: (paint: Paint) => string;
}

/** @returns one element, at its own size and scalable by its view box. */
export function toSvg(figure: Figure, options: SvgOptions): Html {
  const colour = options.toColour ?? toCss;
  const draw = new Drawer(options.id, colour);
  const patterns = figure.patterns.map(
    (p) =>
      `<pattern id="${options.id}${p.name}" width="${p.pitch}" height="${p.pitch}" patternUnits="userSpaceOnUse"${
        p.turn === 0 ? "" : ` patternTransform="rotate(${p.turn})"`
      }><rect width="${p.pitch}" height="${p.pitch}" fill="${colour(p.ground)}"/><path d="M${p.offset} 0V${p.pitch}" stroke="${colour(p.line)}" stroke-width="${p.width}"/></pattern>`,
  );
  const role =
    options.label === undefined
      ? ' aria-hidden="true"'
      : ` role="img" aria-label="${escapeHtml(options.label)}"`;
  const classes = options.className === undefined ? "" : ` class="${options.className}"`;
  return asHtml(
    `<svg xmlns="http://www.w3.org/2000/svg" width="${figure.width}" height="${figure.height}" viewBox="0 0 ${figure.width} ${figure.height}"${classes}${role}>${
      patterns.length === 0 ? "" : `<defs>${patterns.join("")}</defs>`
    }${draw.all(figure.shapes)}</svg>`,
  );
}

class Drawer {
  constructor(
    private readonly id: string,
    private readonly colour: (paint: Paint) => string,
  ) {}

  all(shapes: readonly Shape[]): string {
    return shapes.map((shape) => this.one(shape)).join("");
  }

  private one(shape: Shape): string {
    switch (shape.kind) {
      case "group": {
        const at =
          shape.x === undefined && shape.y === undefined
            ? []
            : [`translate(${shape.x ?? 0} ${shape.y ?? 0})`];
        const place = [...at, ...(shape.scale === undefined ? [] : [`scale(${shape.scale})`])];
        const attributes = place.length === 0 ? {} : { transform: place.join(" ") };
        return `<g${toAttributes(attributes)}>${this.all(shape.shapes)}</g>`;
      }
      case "text":
        return `<text${toAttributes({
          x: shape.x,
          y: shape.y,
          "font-size": shape.size,
          "font-weight": shape.weight,
          "font-family": shape.family === "prose" ? FONT_PROSE : FONT_FIGURES,
          "letter-spacing": shape.tighten === undefined ? undefined : -shape.tighten,
          "text-anchor": shape.anchor,
          fill: this.colour(shape.fill),
          ...(shape.halo === undefined
            ? {}
            : {
                stroke: this.colour(shape.halo),
                "stroke-width": 4,
                "stroke-linejoin": "round",
                "paint-order": "stroke",
              }),
        })}>${escapeHtml(shape.text)}</text>`;
      case "rect":
        return `<rect${toAttributes({
          x: shape.x,
          y: shape.y,
          width: shape.width,
          height: shape.height,
          fill: this.fill(shape.fill),
          opacity: shape.opacity,
          "shape-rendering": shape.crisp ? "crispEdges" : undefined,
          ...this.pen(shape),
        })}/>`;
      case "line":
        return `<line${toAttributes({
          x1: shape.x1,
          y1: shape.y1,
          x2: shape.x2,
          y2: shape.y2,
          "shape-rendering": shape.crisp ? "crispEdges" : undefined,
          ...this.pen(shape),
        })}/>`;
      case "circle":
        return `<circle${toAttributes({
          cx: shape.cx,
          cy: shape.cy,
          r: shape.r,
          fill: this.fill(shape.fill),
          ...this.pen(shape),
        })}/>`;
      case "path":
        return `<path${toAttributes({
          d: shape.d,
          fill: this.fill(shape.fill),
          opacity: shape.opacity,
          ...this.pen(shape),
        })}/>`;
    }
  }

  private fill(fill: Fill | undefined): string {
    if (fill === undefined) return "none";
    return "pattern" in fill ? `url(#${this.id}${fill.pattern})` : this.colour(fill);
  }

  private pen(shape: { stroke?: Paint; strokeWidth?: number; dash?: readonly number[] }) {
    if (shape.stroke === undefined) return {};
    return {
      stroke: this.colour(shape.stroke),
      "stroke-width": shape.strokeWidth,
      "stroke-dasharray": shape.dash?.join(" "),
    };
  }
}

function toAttributes(values: Readonly<Record<string, string | number | undefined>>): string {
  return Object.entries(values)
    .filter(([, value]) => value !== undefined)
    .map(([name, value]) => ` ${name}="${escapeHtml(String(value))}"`)
    .join("");
}
