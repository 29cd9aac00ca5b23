/** @type {import('next').NextConfig} */
const config = {
  // The tests build beside a served application.
  distDir: process.env.LONGREED_DIST_DIR ?? ".next",
  // `npm test` checks the types of the whole repository; a build on a user's machine need not do it again.
  typescript: { ignoreBuildErrors: true },
  poweredByHeader: false,
  serverExternalPackages: ["sequelize", "pg", "pg-hstore", "pg-boss", "umzug", "pino", "@node-rs/argon2", "nodemailer"],
};

export default config;
