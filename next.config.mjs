/** @type {import("next").NextConfig} */
const config = {
  // Each clone builds and runs in its own folder; the dev server and tests may ask for another.
  distDir: process.env.TUFA_DIST_DIR ?? ".next",
  poweredByHeader: false,
  // Compression buffers event streams, and loopback gains nothing from it.
  compress: false,
  serverExternalPackages: ["pg", "pg-boss", "pg-copy-streams", "pino", "@node-rs/argon2", "nodemailer", "piscina"],
  turbopack: { root: import.meta.dirname },
};

export default config;
