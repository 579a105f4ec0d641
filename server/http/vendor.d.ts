declare module "express-mysql-session" {
  import type session from "express-session";
  import type { Pool } from "mysql2/promise";

  interface Options {
    createDatabaseTable?: boolean;
    clearExpired?: boolean;
    checkExpirationInterval?: number;
    expiration?: number;
    endConnectionOnClose?: boolean;
    schema?: { tableName: string };
  }

  interface MySQLStore extends session.Store {
    onReady(): Promise<void>;
    close(): Promise<void>;
  }

  function factory(
    sessions: typeof session,
  ): new (options: Options, connection: Pool) => MySQLStore;
  export = factory;
}
