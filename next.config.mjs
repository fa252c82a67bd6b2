/** @type {import("next").NextConfig} */
const config = {
  poweredByHeader: false,
  reactStrictMode: true,
  // `npm run dev` at another host than it listens on: a page whose socket is refused loads anew for ever.
  allowedDevOrigins: ["127.0.0.1"],
  // The FLAC decoder picks its worker by a name that a bundler cannot follow.
  serverExternalPackages: [
    "@node-rs/argon2",
    "@resvg/resvg-js",
    "@wasm-audio-decoders/flac",
    "opentype.js",
    "pg",
  ],
  // A card in a frame without an origin of its own still gets its fonts.
  headers: () => [
    { source: "/fonts/:file", headers: [{ key: "access-control-allow-origin", value: "*" }] },
  ],
};

export default config;
