/** @type {import('next').NextConfig} */
const config = {
  poweredByHeader: false,
  serverExternalPackages: ["sequelize", "pg", "pg-hstore", "pg-boss", "umzug", "pino", "@node-rs/argon2", "nodemailer"],
};

export default config;
