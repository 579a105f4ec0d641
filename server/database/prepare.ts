import { TypeORMError, type DataSource } from "typeorm";

import { startVocabulary } from "~server/method/vocabulary";

import { migrations } from "./migrations";

/** The database can't be used; the message is a sentence for whoever starts the server. */
export class DatabaseProblem extends Error {
  override readonly name = "DatabaseProblem";
}

/** The first with a uuid column type. */
const OLDEST = [10, 7] as const;
const LOCK = "fogline-migrate";
/** The running server's user may not change the schema; see privileges.ts. */
const DENIED = new Set(["ER_TABLEACCESS_DENIED_ERROR", "ER_DBACCESS_DENIED_ERROR"]);

/**
 * Connects, checks what it connected to and brings the schema up to date.
 * Several processes may call it at once: one migrates, the others wait.
 *
 * @throws {DatabaseProblem} when the database is unreachable, no MariaDB, or older than 10.7.
 */
export async function prepareDatabase(dataSource: DataSource): Promise<void> {
  await connectDatabase(dataSource);
  await requireVersion(dataSource);
  const runner = dataSource.createQueryRunner();
  try {
    const [lock] = await runner.query("SELECT GET_LOCK(CONCAT(?, ':', DATABASE()), 120) AS got", [
      LOCK,
    ]);
    if (Number(lock.got) !== 1) {
      throw new DatabaseProblem("Another process has been migrating the database for two minutes.");
    }
    await useUtf8(dataSource);
    if (migrations.length > 0) await migrate(dataSource);
    else await dataSource.synchronize();
    await startVocabulary(dataSource.manager);
  } finally {
    await runner.query("SELECT RELEASE_LOCK(CONCAT(?, ':', DATABASE()))", [LOCK]);
    await runner.release();
  }
}

async function migrate(dataSource: DataSource): Promise<void> {
  try {
    await dataSource.runMigrations();
  } catch (error) {
    if (!DENIED.has((error as { code?: string }).code ?? "")) throw error;
    throw new DatabaseProblem(
      "The database is not up to date, and the user of DATABASE_URL may not change its schema: " +
        "run npm start, with DATABASE_OWNER_URL if the database is your own.",
      { cause: error },
    );
  }
}

/** True when the database answers and no migration waits. */
export async function isReady(dataSource: DataSource): Promise<boolean> {
  if (!dataSource.isInitialized) return false;
  try {
    await dataSource.query("SELECT 1");
    return migrations.length === 0 || !(await dataSource.showMigrations());
  } catch {
    return false;
  }
}

/** @throws {DatabaseProblem} in words for the operator, if it can't be reached. */
export async function connectDatabase(dataSource: DataSource): Promise<void> {
  if (dataSource.isInitialized) return;
  try {
    await dataSource.initialize();
  } catch (error) {
    // A mapping that does not hold together is our fault, not the database's.
    if (error instanceof TypeORMError) throw error;
    throw new DatabaseProblem(connectionSentence(error), { cause: error });
  }
}

function connectionSentence(error: unknown): string {
  const code = (error as { code?: string }).code ?? "";
  if (code === "ER_ACCESS_DENIED_ERROR" || code === "ER_DBACCESS_DENIED_ERROR") {
    return "The database refused the user or password of DATABASE_URL.";
  }
  if (code === "ER_BAD_DB_ERROR") return "The database named in DATABASE_URL does not exist.";
  return "The database of DATABASE_URL can't be reached: is MariaDB running at that host and port?";
}

async function requireVersion(dataSource: DataSource): Promise<void> {
  const [row] = await dataSource.query("SELECT VERSION() AS version");
  const problem = versionProblem(String(row.version));
  if (problem !== null) throw new DatabaseProblem(problem);
}

/** Why a server that calls itself this can't be used, or null. */
export function versionProblem(version: string): string | null {
  // Behind some proxies the version is prefixed: "5.5.5-10.11.19-MariaDB".
  const match = /^(?:5\.5\.5-)?(\d+)\.(\d+)\.\d+.*mariadb/i.exec(version);
  if (!match) return "The database is not MariaDB: Fogline needs MariaDB 10.7 or newer.";
  const [major, minor] = [Number(match[1]), Number(match[2])];
  if (major < OLDEST[0] || (major === OLDEST[0] && minor < OLDEST[1])) {
    return `The database is MariaDB ${major}.${minor}: Fogline needs MariaDB 10.7 or newer.`;
  }
  return null;
}

/** New tables take the database's character set, which on an existing server may be a narrow one. */
async function useUtf8(dataSource: DataSource): Promise<void> {
  const [row] = await dataSource.query("SELECT @@collation_database AS name, DATABASE() AS db");
  if (row.name === "utf8mb4_unicode_ci") return;
  const name = String(row.db).replace(/`/g, "``");
  await dataSource.query(
    `ALTER DATABASE \`${name}\` CHARACTER SET utf8mb4 COLLATE utf8mb4_unicode_ci`,
  );
}
