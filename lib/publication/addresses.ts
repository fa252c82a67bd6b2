/** Where a publication stands: /t/<lab>/<series> is the newest revision, /t/<lab>/<series>/<revision> never moves. */

/** The loudspeaker's name as part of an address: "Osier 8A" becomes "osier-8a"; never empty. */
export function toSlug(name: string): string {
  const plain = name
    .normalize("NFKD")
    .replaceAll(/[\u0300-\u036f]/g, "")
    .toLowerCase()
    .replaceAll(/[^a-z0-9]+/g, "-")
    .slice(0, 80)
    .replaceAll(/^-+|-+$/g, "");
  return plain === "" ? "loudspeaker" : plain;
}

export const toNewestPath = (labSlug: string, slug: string): string => `/t/${labSlug}/${slug}`;

export const toRevisionPath = (labSlug: string, slug: string, revision: number): string =>
  `${toNewestPath(labSlug, slug)}/${revision}`;

/** The last part of a revision's address; null for anything but a plain count from 1. */
export function parseRevision(text: string): number | null {
  return /^[1-9]\d{0,5}$/.test(text) ? Number(text) : null;
}
