import { createServer, type RequestListener, type ServerResponse } from "node:http";
import type { AddressInfo } from "node:net";

/** A look-up service for the demonstration and the tests: invented papers, on loopback only. */
export interface LookUpFake {
  /** For LOOKUP_URL. */
  url: string;
  close(): Promise<void>;
}

/** Papers it knows, by DOI in lower case. People, journals and results are invented. */
const PAPERS: Readonly<Record<string, object>> = {
  "10.5555/jdw.2027.0144": {
    type: "article-journal",
    title: "Two lanterns behind the fog: damping wings at <i>z</i> above seven",
    author: [
      { family: "Ørnefjeld", given: "Sunniva" },
      { family: "Harrowby", given: "C. P." },
      { literal: "The Candlewick Team" },
    ],
    "container-title": "Journal of Distant Weather",
    volume: "45",
    page: "144-161",
    DOI: "10.5555/jdw.2027.0144",
    issued: { "date-parts": [[2027, 3, 9]] },
  },
  "10.5555/les.2028.0017": {
    type: "article-journal",
    title: "Dark stretches of forest & what they leave open",
    author: [
      { family: "Quarrelow", given: "Signe" },
      { family: "van der Molder", given: "T." },
    ],
    "container-title": "Letters from the Early Sky",
    volume: "12",
    page: "L17",
    DOI: "10.5555/les.2028.0017",
    issued: { "date-parts": [[2028]] },
  },
  "10.48550/arxiv.3305.20251": {
    type: "article",
    title: "A preprint about mist",
    author: [{ family: "Marrowin", given: "Elspeth" }],
    publisher: "arXiv",
    DOI: "10.48550/ARXIV.3305.20251",
    issued: { "date-parts": [[2033, 5]] },
  },
};

function identifierIn(path: string): string {
  try {
    return decodeURIComponent(path.replace(/^\/csl\//, "")).toLowerCase();
  } catch {
    return ""; // no encoding of anything
  }
}

/** Sends CSL-JSON as a service would. */
export function answerCsl(response: ServerResponse, body: unknown, status = 200): void {
  response.writeHead(status, { "content-type": "application/vnd.citationstyles.csl+json" });
  response.end(JSON.stringify(body));
}

/**
 * Starts it.
 *
 * @param answers - Listeners for further identifiers, as a test needs them.
 */
export async function startLookUpFake(
  answers: Readonly<Record<string, RequestListener>> = {},
): Promise<LookUpFake> {
  const server = createServer((request, response) => {
    const id = identifierIn(request.url ?? "");
    const answer = answers[id];
    if (answer) answer(request, response);
    else if (PAPERS[id]) answerCsl(response, PAPERS[id]);
    else answerCsl(response, { message: "unknown" }, 404);
  });
  await new Promise<void>((resolve, reject) => {
    server.once("error", reject);
    server.listen(0, "127.0.0.1", resolve);
  });
  const { port } = server.address() as AddressInfo;
  return {
    url: `http://127.0.0.1:${port}/csl/{id}`,
    close: () =>
      new Promise((resolve) => {
        server.close(() => resolve());
        server.closeAllConnections();
      }),
  };
}
