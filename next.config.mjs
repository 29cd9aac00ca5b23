/** For pages, calls and files alike; the pages' own Content-Security-Policy is in `proxy.ts`, as it changes with each page. */
const everywhere = [
  { key: "X-Content-Type-Options", value: "nosniff" },
  { key: "X-Frame-Options", value: "DENY" },
  { key: "Referrer-Policy", value: "same-origin" },
  { key: "Cross-Origin-Opener-Policy", value: "same-origin" },
  { key: "Permissions-Policy", value: "camera=(self), microphone=(), geolocation=(), payment=()" },
];

/** @type {import('next').NextConfig} */
const config = {
  // The tests build beside a served application.
  distDir: process.env.LONGREED_DIST_DIR ?? ".next",
  // `npm test` checks the types of the whole repository; a build on a user's machine need not do it again.
  typescript: { ignoreBuildErrors: true },
  poweredByHeader: false,
  headers: async () => [
    { source: "/:path*", headers: everywhere },
    { source: "/api/:path*", headers: [{ key: "Content-Security-Policy", value: "default-src 'none'; frame-ancestors 'none'" }] },
  ],
  serverExternalPackages: ["exceljs", "sequelize", "pg", "pg-hstore", "pg-boss", "umzug", "pino", "@node-rs/argon2", "nodemailer"],
};

export default config;
