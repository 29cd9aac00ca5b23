/** @type {import('next').NextConfig} */
const config = {
  // The tests build beside a served application.
  distDir: process.env.LONGREED_DIST_DIR ?? ".next",
  poweredByHeader: false,
  serverExternalPackages: ["sequelize", "pg", "pg-hstore", "pg-boss", "umzug", "pino", "@node-rs/argon2", "nodemailer"],
};

export default config;
