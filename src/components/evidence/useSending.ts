import { useEffect, useRef, useState } from "react";

import { sendEvidence } from "./sendEvidence";

/** A file on its way, or one that was refused and may be sent again. */
export interface SentFile {
  key: number;
  file: File;
  /** Part that has left, from 0 to 1. */
  part: number;
  problem: string | null;
}

/** Sends files to a draft, one after the other. A stopped or kept one leaves the list. */
export function useSending(revisionId: string, onKept: () => void) {
  const [arriving, setArriving] = useState<SentFile[]>([]);
  const next = useRef(0);
  const line = useRef(Promise.resolve());
  const stops = useRef(new Map<number, AbortController>());
  const kept = useRef(onKept);
  useEffect(() => {
    kept.current = onKept;
  }, [onKept]);
  useEffect(() => {
    const running = stops.current;
    // A page that is left sends nothing any more.
    return () => running.forEach((stop) => stop.abort());
  }, []);

  const change = (key: number, changes: Partial<SentFile>) =>
    setArriving((list) => list.map((one) => (one.key === key ? { ...one, ...changes } : one)));
  const drop = (key: number) => setArriving((list) => list.filter((one) => one.key !== key));

  const queue = (key: number, file: File) => {
    const stop = new AbortController();
    stops.current.set(key, stop);
    line.current = line.current.then(async () => {
      const outcome = await sendEvidence(
        revisionId,
        file,
        (part) => change(key, { part }),
        stop.signal,
      );
      stops.current.delete(key);
      if (outcome === "kept") {
        drop(key);
        kept.current();
      } else if (outcome === "stopped") drop(key);
      else change(key, { problem: outcome.problem, part: 0 });
    });
  };

  return {
    arriving,
    send(files: readonly File[]) {
      const added = files.map((file) => ({ key: next.current++, file, part: 0, problem: null }));
      setArriving((list) => [...list, ...added]);
      for (const { key, file } of added) queue(key, file);
    },
    /** Breaks a file off, or puts away one that was refused. */
    stop(key: number) {
      const running = stops.current.get(key);
      if (running) running.abort();
      else drop(key);
    },
    again(key: number) {
      const one = arriving.find((sent) => sent.key === key);
      if (!one) return;
      change(key, { problem: null, part: 0 });
      queue(key, one.file);
    },
  };
}
