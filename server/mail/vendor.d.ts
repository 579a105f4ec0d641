declare module "smtp-server" {
  import type { Server } from "node:net";
  import type { Readable } from "node:stream";

  interface Session {
    envelope: { rcptTo: { address: string }[] };
  }

  interface Options {
    authOptional?: boolean;
    disabledCommands?: string[];
    disableReverseLookup?: boolean;
    size?: number;
    onData?(stream: Readable, session: Session, done: (error?: Error | null) => void): void;
  }

  export class SMTPServer {
    constructor(options: Options);
    server: Server;
    listen(port: number, host: string, ready: () => void): void;
    close(ready: () => void): void;
    on(event: "error", listener: (error: Error) => void): this;
  }
}
