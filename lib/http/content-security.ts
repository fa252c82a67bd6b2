/** What a page of ours may load: itself, and scripts that carry this answer's nonce. */

/**
 * @param nonce fresh for each answer.
 * @param development the development server evaluates code and reloads over a socket.
 */
export function toContentSecurityPolicy(nonce: string, development: boolean): string {
  const script = ["'self'", `'nonce-${nonce}'`, "'strict-dynamic'"];
  if (development) script.push("'unsafe-eval'");
  return [
    "default-src 'self'",
    `script-src ${script.join(" ")}`,
    // Widths and positions stand in style attributes, which no nonce can cover.
    "style-src 'self' 'unsafe-inline'",
    "img-src 'self' blob: data:",
    "font-src 'self'",
    `connect-src 'self'${development ? " ws:" : ""}`,
    "object-src 'none'",
    "base-uri 'self'",
    "form-action 'self'",
    "frame-ancestors 'none'",
  ].join("; ");
}
