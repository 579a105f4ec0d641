import { createPool } from "mysql2";
import {
  RateLimiterMemory,
  RateLimiterMySQL,
  RateLimiterRes,
  type RateLimiterAbstract,
} from "rate-limiter-flexible";

import type { Config } from "~server/config/config";

/** Where a caller stands after a request was counted. */
export interface Spent {
  /** 0 when allowed, else the seconds to wait. */
  wait: number;
  /** Allowed in a window, of so many seconds. */
  points: number;
  windowS: number;
  remaining: number;
  /** Seconds until the window starts anew. */
  resetS: number;
}

/** One counter; keys are addresses of people or callers. */
export interface Limit {
  /** Counts one; returns 0 when allowed, else the seconds to wait. */
  take(key: string): Promise<number>;
  /** Counts one, and says what is left. */
  spend(key: string): Promise<Spent>;
  /** Seconds to wait by what was counted so far; 0 when one more would be allowed. */
  peek(key: string): Promise<number>;
  /** Takes one back, for an attempt that turned out well. */
  giveBack(key: string): Promise<void>;
  forget(key: string): Promise<void>;
}

export type LimitName =
  | "signInPerAddress"
  | "signInPerCaller"
  | "registerPerCaller"
  | "mailPerAddress"
  | "mailPerCaller"
  | "reportPerCaller"
  | "reportInAll"
  | "checkPerRecord"
  | "checkPerAddress"
  | "checkAnswerPerCaller"
  | "tokenFailure"
  | "tokensPerPerson"
  | "lookUp"
  | "upload"
  | "evidence"
  | "download"
  | "graphql";

export type RateLimits = Record<LimitName, Limit> & { close(): Promise<void> };

const DAY_S = 86_400;
const HOUR_S = 3600;
const MINUTE_S = 60;

/**
 * The limits. Those that guard accounts and uploads count in MariaDB, across processes and
 * restarts. Those on plain traffic and on tokens that open nothing count in memory: they protect
 * this process, and a write to disk for each read would cost more than the read. No count keeps
 * 256 random bits from being guessed; their number does.
 */
export function createRateLimits(config: Config): RateLimits {
  const { limits } = config;
  const url = new URL(config.databaseUrl);
  // The limiter speaks callbacks: a promise pool does not work here.
  const pool = createPool({ uri: config.databaseUrl, connectionLimit: 6 });
  const shared = (keyPrefix: LimitName, points: number, duration: number): Limit =>
    wrap(
      new RateLimiterMySQL({
        storeClient: pool,
        storeType: "pool",
        dbName: decodeURIComponent(url.pathname.slice(1)),
        tableName: "rate_limit",
        tableCreated: true, // a migration makes it
        keyPrefix,
        points,
        duration,
      }),
    );
  const own = (keyPrefix: LimitName, points: number): Limit =>
    wrap(new RateLimiterMemory({ keyPrefix, points, duration: MINUTE_S }));
  return {
    signInPerAddress: shared("signInPerAddress", limits.signInPerAddress, limits.signInWindowS),
    signInPerCaller: shared("signInPerCaller", limits.signInPerCaller, limits.signInWindowS),
    registerPerCaller: shared("registerPerCaller", limits.registerPerCaller, HOUR_S),
    mailPerAddress: shared("mailPerAddress", limits.mailPerAddress, HOUR_S),
    mailPerCaller: shared("mailPerCaller", limits.mailPerCaller, HOUR_S),
    reportPerCaller: shared("reportPerCaller", limits.reportPerCaller, HOUR_S),
    reportInAll: shared("reportInAll", limits.reportInAll, HOUR_S),
    checkPerRecord: shared("checkPerRecord", limits.checksPerRecord, DAY_S),
    checkPerAddress: shared("checkPerAddress", limits.checksPerAddress, DAY_S),
    checkAnswerPerCaller: shared("checkAnswerPerCaller", limits.checkAnswersPerCaller, HOUR_S),
    tokenFailure: own("tokenFailure", limits.tokenFailuresPerMinute),
    tokensPerPerson: shared("tokensPerPerson", limits.tokensPerPerson, HOUR_S),
    lookUp: shared("lookUp", limits.lookUpsPerPerson, HOUR_S),
    evidence: shared("evidence", limits.evidencePerHour, HOUR_S),
    upload: shared("upload", limits.uploadsPerMinute, MINUTE_S),
    download: own("download", limits.downloadsPerMinute),
    graphql: own("graphql", limits.graphqlPerMinute),
    close: () =>
      new Promise((resolve, reject) => pool.end((error) => (error ? reject(error) : resolve()))),
  };
}

function wrap(limiter: RateLimiterAbstract): Limit {
  const { points, duration: windowS } = limiter;
  const standing = (
    { msBeforeNext, remainingPoints }: RateLimiterRes,
    refused: boolean,
  ): Spent => ({
    wait: refused ? Math.max(1, msBeforeNext / 1000) : 0,
    points,
    windowS,
    remaining: Math.max(0, remainingPoints),
    resetS: Math.max(0, Math.ceil(msBeforeNext / 1000)),
  });
  const spend = async (key: string): Promise<Spent> => {
    try {
      return standing(await limiter.consume(key), false);
    } catch (refused) {
      // Anything else is a broken store: no count, no entry.
      if (!(refused instanceof RateLimiterRes)) throw refused;
      return standing(refused, true);
    }
  };
  return {
    spend,
    take: async (key) => (await spend(key)).wait,
    async peek(key) {
      const counted = await limiter.get(key);
      return counted && counted.consumedPoints >= points ? standing(counted, true).wait : 0;
    },
    async giveBack(key) {
      await limiter.reward(key);
    },
    async forget(key) {
      await limiter.delete(key);
    },
  };
}
