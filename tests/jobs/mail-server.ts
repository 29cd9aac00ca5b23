import fs from "node:fs";
import os from "node:os";
import path from "node:path";
import MailDev from "maildev";
import { freePort } from "@/scripts/lib/ports.mjs";

export type ReceivedMail = { subject: string; to: { address: string }[]; text: string; html: string; headers: Record<string, string> };

/** A real mail server on loopback that keeps what it gets; started when the test says so. */
export class MailServer {
  private server: MailDev | undefined;
  private readonly directory = fs.mkdtempSync(path.join(os.tmpdir(), "longreed-mail-"));

  private constructor(
    readonly smtpPort: number,
    private readonly webPort: number,
  ) {}

  static async onFreePorts(): Promise<MailServer> {
    return new MailServer(await freePort(), await freePort());
  }

  async start(): Promise<void> {
    this.server = new MailDev({ smtp: this.smtpPort, ip: "127.0.0.1", web: this.webPort, webIp: "127.0.0.1", mailDirectory: this.directory, silent: true });
    await this.server.start();
  }

  async received(): Promise<ReceivedMail[]> {
    const answer = await fetch(`http://127.0.0.1:${this.webPort}/api/email`);
    return (await answer.json()) as ReceivedMail[];
  }

  async stop(): Promise<void> {
    await this.server?.stop();
    fs.rmSync(this.directory, { recursive: true, force: true });
  }
}
