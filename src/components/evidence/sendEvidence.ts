import { bytesInWords, EVIDENCE_LIMITS } from "~shared/evidence/evidence";

export type SendOutcome = "kept" | "stopped" | { problem: string };

const OFFLINE = "No connection to the server. Check your network and try again.";

/**
 * Sends one file of evidence to a draft. XMLHttpRequest, since fetch does not tell how far it is.
 *
 * @param onProgress - Called with the part that has left, from 0 to 1.
 * @param signal - Stops it.
 */
export function sendEvidence(
  revisionId: string,
  file: File,
  onProgress: (part: number) => void,
  signal: AbortSignal,
): Promise<SendOutcome> {
  if (file.size > EVIDENCE_LIMITS.bytes) {
    const problem = `The file has ${bytesInWords(file.size)}; ${bytesInWords(EVIDENCE_LIMITS.bytes)} is the most.`;
    return Promise.resolve({ problem });
  }
  const form = new FormData();
  form.append("revision", revisionId);
  form.append("file", file, file.name);
  return new Promise((resolve) => {
    const request = new XMLHttpRequest();
    request.open("POST", "/api/evidence");
    request.upload.onprogress = ({ loaded, total }) => {
      if (total > 0) onProgress(loaded / total);
    };
    request.onload = () =>
      resolve(request.status === 201 ? "kept" : { problem: sentenceOf(request.responseText) });
    request.onerror = () => resolve({ problem: OFFLINE });
    request.ontimeout = request.onerror;
    request.onabort = () => resolve("stopped");
    signal.addEventListener("abort", () => request.abort());
    if (signal.aborted) resolve("stopped");
    else request.send(form);
  });
}

function sentenceOf(answer: string): string {
  try {
    const { message } = JSON.parse(answer) as { message?: unknown };
    if (typeof message === "string" && message !== "") return message;
  } catch {
    // No answer of ours, then.
  }
  return "The server did not take this file. Try again.";
}
