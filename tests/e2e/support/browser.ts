import { mkdirSync, readFileSync } from "node:fs";
import path from "node:path";

import type axeCore from "axe-core";
import { chromium, type Browser, type Page } from "playwright-core";

import { findProgram } from "../../../scripts/lib/install";

import { DEMONSTRATION_PASSWORD, type Fogline } from "./fogline";

export const SIZES = {
  phone: { width: 390, height: 844 },
  wide: { width: 1440, height: 900 },
} as const;
/** Widths a page is also held to, as it stands on a phone: a small phone, an upright tablet. */
const OTHER_SIZES = {
  smallPhone: { width: 320, height: 640 },
  tablet: { width: 768, height: 1024 },
} as const;
export type Size = keyof typeof SIZES;
export const SIZE_NAMES = Object.keys(SIZES) as Size[];

export const SCHEMES = ["light", "dark"] as const;
export type Scheme = (typeof SCHEMES)[number];

export async function openBrowser(): Promise<Browser> {
  const executablePath = findProgram("chromium");
  if (executablePath === null) throw new Error("Chromium is missing: run npm test -- e2e.");
  return chromium.launch({
    executablePath,
    // As root, and in containers with little shared memory.
    args: ["--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage"],
  });
}

/** A page in a context of its own: no cookie, no cache; what goes wrong in it is kept. */
export interface WatchedPage {
  page: Page;
  /** Console errors, uncaught errors and refusals of the content security policy, in words. */
  problems: string[];
  close(): Promise<void>;
}

export async function openPage(
  browser: Browser,
  { url }: Fogline,
  { size, scheme = "light" }: { size: Size; scheme?: Scheme },
): Promise<WatchedPage> {
  const context = await browser.newContext({
    baseURL: url,
    viewport: SIZES[size],
    hasTouch: size === "phone",
    colorScheme: scheme,
    reducedMotion: "reduce",
    locale: "en-GB",
    timezoneId: "UTC",
    acceptDownloads: true,
  });
  const problems: string[] = [];
  await context.exposeBinding("reportPolicyViolation", (_source, text: string) => {
    problems.push(`refused by the content security policy: ${text}`);
  });
  await context.addInitScript(() => {
    document.addEventListener("securitypolicyviolation", (event) => {
      const report = (window as unknown as { reportPolicyViolation(text: string): void })
        .reportPolicyViolation;
      report(`${event.violatedDirective} ${event.blockedURI}`);
    });
  });
  const page = await context.newPage();
  // As patient as the tests: a browser beside a busy build is slow, not broken.
  page.setDefaultTimeout(60_000);
  page.on("console", (message) => {
    if (message.type() === "error") problems.push(`console: ${message.text()}`);
  });
  page.on("pageerror", (error) => problems.push(`uncaught: ${error.message}`));
  return { page, problems, close: () => context.close() };
}

/** Signs the page's context in through the API, and leaves the page where it is. */
export async function signIn(
  page: Page,
  email: string,
  password = DEMONSTRATION_PASSWORD,
): Promise<void> {
  const response = await page.context().request.post("/graphql", {
    data: {
      query: `mutation SignIn($email: String!, $password: String!) {
        signIn(email: $email, password: $password) { __typename ... on Refusal { message } }
      }`,
      variables: { email, password },
    },
  });
  const body = await response.json();
  if (body.data?.signIn?.__typename !== "Viewer")
    throw new Error(`${email} could not sign in: ${JSON.stringify(body)}`);
}

type Axe = typeof axeCore;
const AXE = readFileSync(require.resolve("axe-core/axe.min.js"), "utf8");

/** Serious and critical findings of axe, each as rule, element and reason; of all its rules unless some are named. */
export async function axeViolations(page: Page, rules?: string[]): Promise<string[]> {
  if (!(await page.evaluate(() => "axe" in window))) await page.evaluate(AXE);
  return page.evaluate(async (only) => {
    const { axe } = window as unknown as { axe: Axe };
    const { violations } = await axe.run(document, {
      resultTypes: ["violations"],
      ...(only ? { runOnly: only } : {}),
    });
    return violations
      .filter(({ impact }) => impact === "serious" || impact === "critical")
      .flatMap(({ id, nodes }) =>
        nodes.map(({ target, failureSummary }) => `${id}: ${target.join(" ")}: ${failureSummary}`),
      );
  }, rules);
}

/** Lets the system ask for a scheme, and waits until the page wears it. */
export async function wear(page: Page, scheme: Scheme): Promise<void> {
  await page.emulateMedia({ colorScheme: scheme });
  await page.locator(`html[data-scheme=${scheme}]`).waitFor({ state: "attached" });
}

/** Elements that reach beyond the window, and texts that are cut off, in words. */
export function layoutProblems(page: Page): Promise<string[]> {
  return page.evaluate(() => {
    const found: string[] = [];
    const width = document.documentElement.clientWidth;
    if (document.documentElement.scrollWidth > width)
      found.push(
        `the page is ${document.documentElement.scrollWidth} wide in a window of ${width}`,
      );
    const describe = (element: Element): string => {
      const name = element.getAttribute("aria-label") ?? element.textContent ?? "";
      const role = element.getAttribute("role") ?? element.tagName.toLowerCase();
      return `${role} "${name.trim().slice(0, 50)}"`;
    };
    const scrollsSideways = (element: Element | null): boolean => {
      for (let at = element; at; at = at.parentElement) {
        const { overflowX } = getComputedStyle(at);
        if ((overflowX === "auto" || overflowX === "scroll") && at.scrollWidth > at.clientWidth)
          return true;
      }
      return false;
    };
    for (const element of Array.from(document.body.querySelectorAll("*"))) {
      if (element.closest("svg") !== null && element.tagName !== "svg") continue;
      const box = element.getBoundingClientRect();
      const style = getComputedStyle(element);
      const hidden = style.visibility === "hidden" || style.opacity === "0";
      // Text for screen readers only is clipped to a point on purpose.
      const clipped = style.clip !== "auto" || style.clipPath !== "none";
      if (hidden || clipped || box.width <= 1 || box.height <= 1) continue;
      if ((box.right > width + 1 || box.left < -1) && !scrollsSideways(element.parentElement))
        found.push(`${describe(element)} reaches from ${box.left} to ${box.right} of ${width}`);
      const ownText = Array.from(element.childNodes).some(
        (node) => node.nodeType === Node.TEXT_NODE && node.textContent?.trim(),
      );
      const clips = style.overflowX === "hidden" || style.overflowX === "clip";
      if (ownText && clips && element.scrollWidth > element.clientWidth + 1)
        found.push(`${describe(element)} is cut: ${element.scrollWidth} in ${element.clientWidth}`);
    }
    return found;
  });
}

/**
 * What overflows or is cut when the window of an open page gets another width, in words. The page
 * is not loaded again, which makes it cheap enough for every situation.
 */
export async function layoutProblemsAtOtherSizes(
  page: Page,
  present: Size,
  photograph: (size: string) => Promise<void>,
): Promise<string[]> {
  const found: string[] = [];
  for (const [name, size] of Object.entries(OTHER_SIZES)) {
    await page.setViewportSize(size);
    await drawn(page);
    await photograph(name);
    let problems = await layoutProblems(page);
    if (problems.length > 0) {
      // A drawing takes its new width a moment after the window's; what stays is a fault.
      await page.waitForTimeout(500);
      problems = await layoutProblems(page);
    }
    found.push(...problems.map((words) => `${name}: ${words}`));
    const first = await page.getByRole("heading", { level: 1 }).count();
    if (first !== 1) found.push(`${name}: ${first} headings of the first level`);
  }
  await page.setViewportSize(SIZES[present]);
  await drawn(page);
  return found;
}

/** Waits until what depends on the window's width was measured and drawn anew. */
async function drawn(page: Page): Promise<void> {
  await page.evaluate(
    () =>
      new Promise<void>((resolve) => {
        let frames = 0;
        const next = (): void => {
          frames += 1;
          if (frames === 4) resolve();
          else requestAnimationFrame(next);
        };
        requestAnimationFrame(next);
      }),
  );
  await page.waitForFunction(() => !document.querySelector("[aria-busy=true]"));
}

/** Bytes over the network, compressed as sent, for everything a page loads until `ready` holds. */
export async function transferredBytes(page: Page, load: () => Promise<unknown>): Promise<number> {
  const session = await page.context().newCDPSession(page);
  await session.send("Network.enable");
  await session.send("Network.setCacheDisabled", { cacheDisabled: true });
  let bytes = 0;
  session.on("Network.loadingFinished", ({ encodedDataLength }) => (bytes += encodedDataLength));
  await load();
  await session.detach();
  return bytes;
}

/** Saves what the page looks like for a person to judge, if E2E_SCREENSHOTS names a folder. */
export async function screenshot(page: Page, name: string): Promise<void> {
  const folder = process.env.E2E_SCREENSHOTS;
  if (!folder) return;
  mkdirSync(folder, { recursive: true });
  await page.screenshot({ path: path.join(folder, `${name}.png`), fullPage: true });
}
