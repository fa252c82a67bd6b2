/** What a page that was given a link asks for, to unfold it: oEmbed 1.0, JSON and XML. */
import { escapeHtml } from "../html/html";
import { NARROW_CARD, WIDE_CARD, type CardSize } from "./card-layout";

export interface OembedInput {
  title: string;
  lab: string;
  /** Absolute address of the web server, without a slash at the end. */
  origin: string;
  /** Absolute addresses of this revision. */
  card: string;
  picture: string | null;
  /** Most that there is room for, px. */
  maxWidth: number;
  maxHeight: number;
}

export type Oembed = Readonly<Record<string, string | number>>;

const CACHE_S = 60;
const PICTURE: CardSize = { width: 1200, height: 630 };

/** A card of 640 x 360, or of 320 where that is all the room; a bare link where neither fits. */
export function toOembed(input: OembedInput): Oembed {
  const size = [WIDE_CARD, NARROW_CARD].find(
    ({ width, height }) => width <= input.maxWidth && height <= input.maxHeight,
  );
  const common = {
    version: "1.0",
    title: input.title,
    author_name: input.lab,
    provider_name: "Tidemark",
    provider_url: input.origin,
    cache_age: CACHE_S,
    ...(input.picture === null || PICTURE.width > input.maxWidth || PICTURE.height > input.maxHeight
      ? {}
      : {
          thumbnail_url: input.picture,
          thumbnail_width: PICTURE.width,
          thumbnail_height: PICTURE.height,
        }),
  };
  return size === undefined
    ? { type: "link", ...common }
    : {
        type: "rich",
        ...common,
        html: toEmbedCode({ card: input.card, title: input.title, size }),
        width: size.width,
        height: size.height,
      };
}

/** The code that puts a card into an article. */
export const toEmbedCode = ({
  card,
  title,
  size,
}: {
  card: string;
  title: string;
  size: CardSize;
}): string => {
  const attributes = [
    ["src", card],
    ["width", String(size.width)],
    ["height", String(size.height)],
    ["title", title],
    ["loading", "lazy"],
  ] as const;
  return `<iframe ${attributes.map(([name, value]) => `${name}="${escapeHtml(value)}"`).join(" ")}></iframe>`;
};

/** The same answer as XML. */
export const toOembedXml = (answer: Oembed): string =>
  `<?xml version="1.0" encoding="utf-8" standalone="yes"?>\n<oembed>${Object.entries(answer)
    .map(([name, value]) => `<${name}>${escapeHtml(String(value))}</${name}>`)
    .join("")}</oembed>\n`;

/** Two links for the head of the page: a consumer finds the endpoint through them. */
export const toOembedAddress = (origin: string, page: string, format: "json" | "xml"): string =>
  `${origin}/oembed?url=${encodeURIComponent(page)}&format=${format}`;

/** The parts of a publication's address; null where it is none of ours. @param revision null: the newest */
export function parsePublicationUrl(
  url: string,
  origin: string,
): { lab: string; slug: string; revision: string | null } | null {
  if (!URL.canParse(url)) return null;
  const { origin: from, pathname } = new URL(url);
  if (from !== new URL(origin).origin) return null;
  const found = /^\/t\/([^/]+)\/([^/]+?)(?:\/([^/]+))?(?:\/card)?\/?$/.exec(pathname);
  const [, lab, slug, revision = null] = found ?? [];
  return lab === undefined || slug === undefined ? null : { lab, slug, revision };
}
