import type { AddressInfo } from "node:net";
import type { Readable } from "node:stream";

import { SMTPServer } from "smtp-server";
import type { DataSource } from "typeorm";

import { CaughtMailRow } from "./caughtMail.entity";
import { readMessage } from "./message";

const MAX_BYTES = 1_000_000;

export interface MailCatcher {
  /** For SMTP_URL. */
  url: string;
  close(): Promise<void>;
}

/**
 * A mail server that delivers nothing: what it takes is kept for a maintainer of the
 * demonstration to read. Listens on loopback only.
 */
export async function startMailCatcher(dataSource: DataSource, port = 0): Promise<MailCatcher> {
  const server = new SMTPServer({
    authOptional: true,
    disabledCommands: ["STARTTLS", "AUTH"],
    disableReverseLookup: true,
    size: MAX_BYTES,
    onData: (stream, session, done) => {
      const to = session.envelope.rcptTo.map(({ address }) => address);
      keep(dataSource, stream, to).then(
        () => done(),
        (error: Error) => done(error),
      );
    },
  });
  await new Promise<void>((resolve, reject) => {
    server.on("error", reject);
    server.listen(port, "127.0.0.1", resolve);
  });
  const bound = (server.server.address() as AddressInfo).port;
  return {
    url: `smtp://127.0.0.1:${bound}`,
    close: () => new Promise((resolve) => server.close(resolve)),
  };
}

async function keep(dataSource: DataSource, stream: Readable, to: string[]): Promise<void> {
  const chunks: Buffer[] = [];
  for await (const chunk of stream) chunks.push(chunk as Buffer);
  const { subject, text } = readMessage(Buffer.concat(chunks));
  await dataSource.manager.insert(
    CaughtMailRow,
    to.map((address) => ({ to: address, subject: subject.slice(0, 255), text })),
  );
}
