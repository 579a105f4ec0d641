import type { RequestHandler } from "express";
import session from "express-session";
import sessionStore from "express-mysql-session";
import { createPool } from "mysql2/promise";
import type { DataSource } from "typeorm";

import type { Config } from "~server/config/config";
import { sessionSecret } from "~server/database/settings";

declare module "express-session" {
  interface SessionData {
    userId: string;
    /** User.sessionEpoch at sign-in; the session ends when the person's number moves on. */
    epoch: number;
  }
}

export const SESSION_COOKIE = "fogline.sid";
const SESSION_DAYS = 14;
const DAY_MS = 86_400_000;

export interface Sessions {
  middleware: RequestHandler;
  close(): Promise<void>;
}

/** Sessions in MariaDB, behind a signed HttpOnly cookie. Nobody gets one before signing in. */
export async function createSessions(config: Config, dataSource: DataSource): Promise<Sessions> {
  const pool = createPool({ uri: config.databaseUrl, connectionLimit: 4, timezone: "Z" });
  const Store = sessionStore(session);
  const store = new Store(
    {
      createDatabaseTable: false, // a migration makes it
      clearExpired: true,
      expiration: SESSION_DAYS * DAY_MS,
      schema: { tableName: "session" },
    },
    pool,
  );
  await store.onReady();
  const middleware = session({
    store,
    name: SESSION_COOKIE,
    secret: await sessionSecret(dataSource.manager),
    resave: false,
    saveUninitialized: false,
    rolling: true,
    cookie: {
      httpOnly: true,
      sameSite: "lax",
      secure: config.publicUrl.startsWith("https:") ? true : "auto",
      maxAge: SESSION_DAYS * DAY_MS,
    },
  });
  return {
    middleware,
    close: async () => {
      await store.close();
      await pool.end();
    },
  };
}

type Sessional = Parameters<RequestHandler>[0];

/** Starts a session under a new id: an id fixed before sign-in is worth nothing after it. */
export async function startSession(req: Sessional, userId: string, epoch: number): Promise<void> {
  await new Promise<void>((resolve, reject) =>
    req.session.regenerate((error) => (error ? reject(error) : resolve())),
  );
  req.session.userId = userId;
  req.session.epoch = epoch;
  await new Promise<void>((resolve, reject) =>
    req.session.save((error) => (error ? reject(error) : resolve())),
  );
}

/** Forgets the session on the server; the cookie then opens nothing. */
export async function endSession(req: Sessional): Promise<void> {
  await new Promise<void>((resolve, reject) =>
    req.session.destroy((error) => (error ? reject(error) : resolve())),
  );
}
