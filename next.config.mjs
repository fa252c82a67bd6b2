/** @type {import("next").NextConfig} */
const config = {
  poweredByHeader: false,
  reactStrictMode: true,
  serverExternalPackages: ["@node-rs/argon2", "@resvg/resvg-js", "opentype.js", "pg"],
};

export default config;
