import { randomBytes } from "node:crypto";
import os from "node:os";
import path from "node:path";

import { createConnection, type Connection, type RowDataPacket } from "mysql2/promise";

import { freePort } from "../../../scripts/lib/mariadb";
import { launchServer, prepareDatabase, serverEnvironment } from "../../../scripts/lib/server";

/** Password of every invented person; the seed gives it to them. */
export const DEMONSTRATION_PASSWORD = "lifting-fog-2026";

export interface Mail {
  subject: string;
  text: string;
}

/** The real server, compiled, with the exported client, over a database of its own. */
export interface Fogline {
  url: string;
  databaseUrl: string;
  /** Mails the local mail server caught for an address, oldest first; waits until there are `atLeast`. */
  mailsTo(address: string, atLeast?: number): Promise<Mail[]>;
  /** The mail that waits for an address where nothing delivers it. */
  waitingMail(address: string): Promise<Mail>;
  /** First link in a mail, as a path of this server. */
  linkIn(mail: Mail): string;
  stop(): Promise<void>;
}

export interface FoglineOptions {
  /** False: an empty registry, as DEMO=0 starts it. */
  demonstration?: boolean;
}

export async function startFogline({
  demonstration = true,
}: FoglineOptions = {}): Promise<Fogline> {
  const server = process.env.TEST_DATABASE_URL;
  if (!server) throw new Error("TEST_DATABASE_URL is missing: run npm test -- e2e.");
  const name = `fogline_e2e_${randomBytes(5).toString("hex")}`;
  const database = await createConnection(server);
  await database.query(`CREATE DATABASE ${name} CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`);
  // As npm start does it: the server runs as a user that can't touch what stands in the event log.
  await database.query(`CREATE USER '${name}'@'%' IDENTIFIED BY '${name}'`);
  const stops = [
    async () => {
      await database.query(`DROP USER '${name}'@'%'`);
      await database.query(`DROP DATABASE IF EXISTS ${name}`);
      await database.end();
    },
  ];
  const stop = async (): Promise<void> => {
    for (const action of stops.splice(0).reverse()) await action();
  };
  try {
    const databaseUrl = `${server.replace(/\/$/, "")}/${name}`;
    const applicationUrl = Object.assign(new URL(databaseUrl), { username: name, password: name });
    const port = await freePort();
    const environment = serverEnvironment(applicationUrl.href, port, {
      DEMO: demonstration ? "1" : "0",
      PUBLIC_URL: `http://127.0.0.1:${port}`,
    });
    const log = path.join(os.tmpdir(), `${name}.log`);
    await prepareDatabase(environment, log, databaseUrl);
    const running = await launchServer(environment, { log });
    stops.push(running.stop);
    await database.query(`USE ${name}`);
    return {
      url: running.url,
      databaseUrl,
      mailsTo: (address, atLeast = 1) => mailsTo(database, address, atLeast),
      waitingMail: (address) => waitingMail(database, address),
      linkIn: (mail) => linkIn(mail, running.url),
      stop,
    };
  } catch (error) {
    await stop();
    throw error;
  }
}

async function mailsTo(database: Connection, address: string, atLeast: number): Promise<Mail[]> {
  const deadline = Date.now() + 30_000;
  for (;;) {
    const [rows] = await database.query<RowDataPacket[]>(
      "SELECT subject, text FROM caught_mail WHERE `to` = ? ORDER BY id",
      [address],
    );
    if (rows.length >= atLeast) return rows.map(({ subject, text }) => ({ subject, text }));
    if (Date.now() > deadline)
      throw new Error(`${rows.length} mails reached ${address}, expected ${atLeast}`);
    await new Promise((resolve) => setTimeout(resolve, 200));
  }
}

async function waitingMail(database: Connection, address: string): Promise<Mail> {
  const [rows] = await database.query<RowDataPacket[]>(
    "SELECT subject, text FROM outbox_mail WHERE `to` = ? ORDER BY id DESC LIMIT 1",
    [address],
  );
  if (!rows[0]) throw new Error(`no mail waits for ${address}`);
  return { subject: rows[0].subject, text: rows[0].text };
}

function linkIn(mail: Mail, url: string): string {
  const link = /https?:\/\/[^\s<>"]+/.exec(mail.text)?.[0];
  if (!link?.startsWith(url)) throw new Error(`the mail has no link to ${url}: ${mail.text}`);
  return link.slice(url.length);
}
