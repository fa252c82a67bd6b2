/** What the head of a publication's page tells those who link to it: link preview and oEmbed. */
import { html, type Html } from "@/lib/html/html";

interface PublicationHead {
  title: string;
  description: string;
  /** Absolute addresses. */
  page: string;
  picture: string;
  alt: string;
  oembed: (format: "json" | "xml") => string;
}

export function toPublicationHead(head: PublicationHead): Html {
  const { title, description, page, picture, alt, oembed } = head;
  const properties = [
    ["og:type", "article"],
    ["og:site_name", "Tidemark"],
    ["og:title", title],
    ["og:description", description],
    ["og:url", page],
    ["og:image", picture],
    ["og:image:type", "image/png"],
    ["og:image:width", "1200"],
    ["og:image:height", "630"],
    ["og:image:alt", alt],
  ] as const;
  return html`<link
      rel="alternate"
      type="application/json+oembed"
      href="${oembed("json")}"
      title="${title}"
    />
    <link rel="alternate" type="text/xml+oembed" href="${oembed("xml")}" title="${title}" />
    ${properties.map(([name, value]) => html`<meta property="${name}" content="${value}" />`)}
    <meta name="twitter:card" content="summary_large_image" />`;
}
