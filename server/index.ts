import "reflect-metadata";

import { createServer, type Server } from "node:http";

import type { DataSource } from "typeorm";

import { buildApp } from "~server/app";
import { startLookUpFake } from "~server/citation/lookUpFake";
import { ConfigError, readConfig, type Config } from "~server/config/config";
import { createDataSource } from "~server/database/dataSource";
import { DatabaseProblem, prepareDatabase } from "~server/database/prepare";
import { sweep } from "~server/database/housekeeping";
import { isDemonstration } from "~server/database/settings";
import { createLogger, failure, type Logger } from "~server/logging/logger";
import { startMailCatcher } from "~server/mail/catcher";
import { startOutbox } from "~server/mail/outboxWorker";
import { hasWebExport } from "~server/static/webClient";

/** The server can't start; the message is a sentence for whoever started it. */
class StartProblem extends Error {
  override readonly name = "StartProblem";
}

/** Requests under way have this long to end once the server was told to stop. */
const GRACE_MS = 8000;
const REQUEST_MS = 120_000;
const SWEEP_MS = 3_600_000;

type Closing = () => Promise<unknown>;

/** Starts everything; what it opened is added to `open`, in order. */
async function start(config: Config, open: Closing[]): Promise<void> {
  if (!hasWebExport(config.webRoot)) {
    throw new StartProblem(
      `The web client is not exported: there is no index.html in ${config.webRoot}. ` +
        "Run npm start, which exports it.",
    );
  }
  const logger = createLogger(config.logLevel);
  const dataSource = createDataSource(config.databaseUrl);
  open.push(async () => {
    if (dataSource.isInitialized) await dataSource.destroy();
  });
  await prepareDatabase(dataSource);

  open.push(keepSwept(dataSource, logger));
  const demonstration = await isDemonstration(dataSource.manager);
  let { lookUpUrl, smtpUrl } = config;
  if (lookUpUrl === null && demonstration) {
    const fake = await startLookUpFake();
    open.push(fake.close);
    lookUpUrl = fake.url;
  }
  const { app, close } = await buildApp({ ...config, lookUpUrl }, dataSource, logger);
  open.push(close);

  if (smtpUrl === null && demonstration) {
    const catcher = await startMailCatcher(dataSource);
    open.push(catcher.close);
    smtpUrl = catcher.url;
  }
  if (smtpUrl === null) {
    logger.warn("SMTP_URL is not set: mails wait in the outbox until it is.");
  } else {
    open.push(startOutbox({ dataSource, logger, smtpUrl, from: config.mailFrom }).close);
  }

  const server = createServer(app);
  server.requestTimeout = REQUEST_MS;
  await listen(server, config);
  open.push(() => closeServer(server));
  logger.info({ host: config.host, port: config.port }, "listening");
}

/** Sweeps now and every hour, until the returned function is called. */
function keepSwept(dataSource: DataSource, logger: Logger): Closing {
  let running: Promise<void> = Promise.resolve();
  const run = (): void => {
    running = sweep(dataSource.manager).catch((error: unknown) => {
      logger.error(failure(error), "housekeeping failed");
    });
  };
  run();
  const timer = setInterval(run, SWEEP_MS);
  return () => {
    clearInterval(timer);
    return running;
  };
}

function listen(server: Server, { host, port }: Config): Promise<void> {
  return new Promise((resolve, reject) => {
    server.once("error", (error: NodeJS.ErrnoException) => {
      if (error.code === "EADDRINUSE") {
        reject(new StartProblem(`Port ${port} is taken by another program: choose one with PORT.`));
      } else if (error.code === "EACCES") {
        reject(new StartProblem(`This user may not open port ${port}: choose one above 1023.`));
      } else {
        reject(new StartProblem(`The address ${host}:${port} can't be opened (${error.code}).`));
      }
    });
    server.listen(port, host, resolve);
  });
}

async function closeServer(server: Server): Promise<void> {
  const ended = new Promise<void>((resolve) => server.close(() => resolve()));
  server.closeIdleConnections();
  const timer = setTimeout(() => server.closeAllConnections(), GRACE_MS);
  await ended;
  clearTimeout(timer);
}

/** Says what went wrong to whoever started the server: in a sentence if it is one of ours. */
function complain(error: unknown): void {
  const expected =
    error instanceof ConfigError ||
    error instanceof DatabaseProblem ||
    error instanceof StartProblem;
  process.stderr.write(`${expected ? error.message : JSON.stringify(failure(error))}\n`);
}

async function main(): Promise<void> {
  const open: Closing[] = [];
  let stopping: Promise<void> | null = null;
  /** Ends everything, last opened first; the exit code says whether it was meant to end. */
  const stop = (code: number): Promise<void> => {
    stopping ??= (async () => {
      for (const close of open.reverse()) {
        await close().catch(complain);
      }
      process.exit(code);
    })();
    return stopping;
  };
  for (const signal of ["SIGTERM", "SIGINT"] as const) process.on(signal, () => void stop(0));
  process.on("uncaughtException", (error) => {
    complain(error);
    void stop(1);
  });

  try {
    await start(readConfig(process.env), open);
  } catch (error) {
    complain(error);
    await stop(1);
  }
}

void main();
