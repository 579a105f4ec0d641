import path from "node:path";

import { build } from "esbuild";
import { chromium } from "playwright-core";

import { findProgram } from "../lib/install";
import type { Moves } from "./sliderPage";

export interface SliderTiming {
  /** The first move of a page, when nothing is compiled yet. */
  readonly first: number;
  readonly median: number;
  readonly p95: number;
  readonly worst: number;
  readonly mean: number;
  readonly moves: number;
  readonly scored: number;
}

const MOVES = 600;

/**
 * Times the moves of a slider in a headless Chromium, milliseconds.
 *
 * @returns Null where there is no Chromium.
 */
export async function timeSlider(): Promise<SliderTiming | null> {
  const executablePath = findProgram("chromium");
  if (executablePath === null) return null;
  const bundle = await build({
    entryPoints: [path.join(__dirname, "sliderPage.ts")],
    bundle: true,
    write: false,
    format: "iife",
    globalName: "slider",
    minify: true,
    platform: "browser",
    // readouts.ts stands beside Readouts.tsx.
    resolveExtensions: [".ts", ".tsx", ".mjs", ".js", ".json"],
    logLevel: "error",
  });
  const browser = await chromium.launch({
    executablePath,
    args: ["--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage"],
  });
  try {
    const page = await browser.newPage();
    await page.addScriptTag({ content: bundle.outputFiles[0]!.text });
    const { ms, mean, scored } = (await page.evaluate(`slider.moveSlider(${MOVES})`)) as Moves;
    const sorted = [...ms].sort((a, b) => a - b);
    return {
      first: ms[0]!,
      median: sorted[Math.floor(MOVES / 2)]!,
      p95: sorted[Math.floor(0.95 * MOVES)]!,
      worst: sorted[MOVES - 1]!,
      mean,
      moves: MOVES,
      scored,
    };
  } finally {
    await browser.close();
  }
}
