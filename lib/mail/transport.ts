import nodemailer, { type Transporter } from "nodemailer";
import { env } from "@/lib/env";

const loopback = new Set(["127.0.0.1", "localhost", "[::1]"]);

let transporter: Transporter | undefined;

/** One for a process. A mail server on loopback is spoken to without TLS, any other as its address says. */
export function transport(): Transporter {
  if (transporter) return transporter;
  const { hostname, port, protocol, username, password } = new URL(env().SMTP_URL);
  const secure = protocol === "smtps:";
  transporter = nodemailer.createTransport({
    host: hostname,
    port: Number(port || (secure ? 465 : 587)),
    secure,
    ignoreTLS: loopback.has(hostname),
    ...(username ? { auth: { user: decodeURIComponent(username), pass: decodeURIComponent(password) } } : {}),
  });
  return transporter;
}
