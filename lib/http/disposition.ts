/**
 * The header `Content-Disposition` of a download: a plain name for old clients, the true one beside
 * it (RFC 6266, RFC 8187).
 */
export function toDisposition(fileName: string): string {
  const plain = fileName.replaceAll(/[^\w.() -]/g, "_");
  const encoded = encodeURIComponent(fileName).replaceAll(
    /['()*]/g,
    (letter) => `%${letter.charCodeAt(0).toString(16).toUpperCase()}`,
  );
  return `attachment; filename="${plain}"; filename*=UTF-8''${encoded}`;
}
