declare module "cors" {
  import type { RequestHandler } from "express";

  interface Options {
    origin: "*";
    methods: string[];
    allowedHeaders: string[];
    exposedHeaders: string[];
    /** Seconds for which a browser may remember a preflight's answer. */
    maxAge: number;
  }

  function cors(options: Options): RequestHandler;
  export = cors;
}
