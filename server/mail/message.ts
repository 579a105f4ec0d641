/** What the demonstration shows of a message it caught. */
export interface ReadMessage {
  subject: string;
  text: string;
}

/**
 * Reads a plain-text message as our own outbox writes it: headers, then one body in 7bit, 8bit,
 * quoted-printable or base64. No parser of mail at large: nothing else arrives here.
 */
export function readMessage(raw: Buffer): ReadMessage {
  // Byte for byte until the encoding is known.
  const source = raw.toString("latin1");
  const end = source.indexOf("\r\n\r\n");
  const head = (end < 0 ? source : source.slice(0, end)).replace(/\r\n[ \t]+/g, " ");
  const body = end < 0 ? "" : source.slice(end + 4);
  const header = (name: string): string =>
    new RegExp(`^${name}: *(.*)$`, "im").exec(head)?.[1]?.trim() ?? "";
  return {
    subject: decodeWords(header("subject")),
    text: decodeBody(body, header("content-transfer-encoding").toLowerCase())
      .toString("utf8")
      .replace(/\r\n/g, "\n"),
  };
}

function decodeBody(body: string, encoding: string): Buffer {
  if (encoding === "base64") return Buffer.from(body, "base64");
  if (encoding === "quoted-printable") return quotedPrintable(body.replace(/=[ \t]*\r\n/g, ""));
  return Buffer.from(body, "latin1");
}

function quotedPrintable(text: string): Buffer {
  const bytes = text.replace(/=([0-9a-f]{2})/gi, (_, hex: string) =>
    String.fromCharCode(parseInt(hex, 16)),
  );
  return Buffer.from(bytes, "latin1");
}

/** Encoded words of a header (RFC 2047), in UTF-8. */
function decodeWords(text: string): string {
  const words = text.replace(/\?=\s+=\?/g, "?==?"); // space between two words is no space
  let bytes = "";
  let at = 0;
  for (const match of words.matchAll(/=\?utf-8\?([bq])\?([^?]*)\?=/gi)) {
    const [whole, kind = "", payload = ""] = match;
    const decoded =
      kind.toLowerCase() === "b"
        ? Buffer.from(payload, "base64")
        : quotedPrintable(payload.replace(/_/g, " "));
    bytes += words.slice(at, match.index) + decoded.toString("latin1");
    at = match.index + whole.length;
  }
  return Buffer.from(bytes + words.slice(at), "latin1").toString("utf8");
}
