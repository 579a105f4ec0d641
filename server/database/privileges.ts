import { createConnection, type Connection, type RowDataPacket } from "mysql2/promise";
import type { DataSource } from "typeorm";

/**
 * What the running server may do in each table. It may add to the event log and move its head, but
 * neither change nor remove an event; nor may it change the schema. Who holds the other database
 * user, which owns the schema, is the operator.
 */
const EVERYTHING = "SELECT, INSERT, UPDATE, DELETE";
const LESS: Readonly<Record<string, string>> = {
  event: "SELECT, INSERT",
  event_head: "SELECT, INSERT, UPDATE",
  migrations: "SELECT",
};

/** Rights over the log that no running server should hold. */
const OVER_THE_LOG = ["UPDATE", "DELETE", "DROP", "ALTER", "ALL PRIVILEGES"];

const NOTHING_TO_REVOKE = "ER_NONEXISTING_TABLE_GRANT";

/**
 * Gives the database user of the running server its rights, table by table; called after every
 * migration, so that a new table has its own.
 *
 * @param owner - Connected as the user that owns the schema, with the right to grant.
 * @param applicationUrl - The running server's mysql:// address.
 * @returns Whether there are two users; false when both addresses lead to the same one.
 */
export async function grantToApplication(
  owner: DataSource,
  applicationUrl: string,
): Promise<boolean> {
  const account = await accountOf(applicationUrl);
  const [{ own }] = (await owner.query("SELECT CURRENT_USER() AS own")) as [{ own: string }];
  if (own === account) return false;
  const tables: { name: string }[] = await owner.query(
    `SELECT table_name AS name FROM information_schema.tables
      WHERE table_schema = DATABASE() AND table_type = 'BASE TABLE'`,
  );
  const grantee = quotedAccount(account);
  for (const { name } of tables) {
    const table = `\`${name.replace(/`/g, "``")}\``;
    const rights = LESS[name];
    if (rights !== undefined) {
      // What an earlier, more generous hand gave.
      await owner.query(`REVOKE ALL PRIVILEGES ON ${table} FROM ${grantee}`).catch(unlessNone);
    }
    await owner.query(`GRANT ${rights ?? EVERYTHING} ON ${table} TO ${grantee}`);
  }
  return true;
}

function unlessNone(error: { code?: string }): void {
  if (error.code !== NOTHING_TO_REVOKE) throw error;
}

/** Whether the database itself keeps this user from changing or removing an event. */
export async function isLogProtected(applicationUrl: string): Promise<boolean> {
  return connected(applicationUrl, async (connection) => {
    const [rights] = await connection.query<RowDataPacket[]>(
      `SELECT privilege_type AS name FROM information_schema.user_privileges
       UNION SELECT privilege_type FROM information_schema.schema_privileges
              WHERE DATABASE() LIKE table_schema
       UNION SELECT privilege_type FROM information_schema.table_privileges
              WHERE table_schema = DATABASE() AND table_name = 'event'`,
    );
    if (rights.some(({ name }) => OVER_THE_LOG.includes(String(name)))) return false;
    // Rights may also come by a role; a statement that would meet no row asks without touching one.
    return (
      (await isRefused(connection, "UPDATE event SET kind = kind WHERE 1 = 0")) &&
      (await isRefused(connection, "DELETE FROM event WHERE 1 = 0"))
    );
  });
}

async function isRefused(connection: Connection, statement: string): Promise<boolean> {
  try {
    await connection.query(statement);
    return false;
  } catch (error) {
    if ((error as { code?: string }).code === "ER_TABLEACCESS_DENIED_ERROR") return true;
    throw error;
  }
}

/** "user@host" as the database knows whoever connects with this address. */
function accountOf(url: string): Promise<string> {
  // Without a database: before the first grant this user may not enter it.
  const server = new URL(url);
  server.pathname = "/";
  return connected(server.href, async (connection) => {
    const [[row]] = await connection.query<RowDataPacket[]>("SELECT CURRENT_USER() AS account");
    return String(row?.account);
  });
}

function quotedAccount(account: string): string {
  const at = account.lastIndexOf("@");
  const quoted = (text: string): string => `'${text.replace(/['\\]/g, "\\$&")}'`;
  return `${quoted(account.slice(0, at))}@${quoted(account.slice(at + 1))}`;
}

async function connected<T>(url: string, work: (connection: Connection) => Promise<T>): Promise<T> {
  const connection = await createConnection(url);
  try {
    return await work(connection);
  } finally {
    await connection.end();
  }
}
