/**
 * The environment of the demo's processes: what the shell set, and our own parts where it set nothing.
 *
 * @param {object} options
 * @param {Record<string, string | undefined>} options.given
 * @param {string} options.dataDirectory
 * @param {{ web: number, smtp: number }} options.ports
 * @param {string} options.databaseUrl
 * @param {string} options.authSecret
 * @returns {Record<string, string | undefined> & NodeJS.ProcessEnv}
 */
export function demoEnvironment({ given, dataDirectory, ports, databaseUrl, authSecret }) {
  return {
    ...given,
    NODE_ENV: "production",
    DATABASE_URL: databaseUrl,
    SMTP_URL: given.SMTP_URL || `smtp://127.0.0.1:${ports.smtp}`,
    AUTH_SECRET: given.AUTH_SECRET || authSecret,
    APP_URL: given.APP_URL || `http://127.0.0.1:${ports.web}`,
    PORT: String(ports.web),
    AUTH_TRUST_HOST: "true",
    LONGREED_DEMO: "1",
    LONGREED_DEMO_PASSWORD: given.LONGREED_DEMO_PASSWORD || "longreed-demo",
    LONGREED_DATA_DIR: dataDirectory,
  };
}
