/** Sends one text file to the server; its answer names the upload for the import. */

export type UploadOutcome = { id: string; name: string } | { problem: string };

export async function uploadFile(
  kind: "csv" | "bib",
  file: { name: string; text: string },
): Promise<UploadOutcome> {
  const form = new FormData();
  form.append("kind", kind);
  form.append("file", new Blob([file.text], { type: "text/plain" }), file.name);
  let response: Response;
  try {
    response = await fetch("/api/uploads", {
      method: "POST",
      body: form,
      credentials: "same-origin",
    });
  } catch {
    return { problem: "No connection to the server. Check your network and try again." };
  }
  const body = (await response.json().catch(() => null)) as {
    id?: string;
    name?: string;
    message?: string;
    error?: string | { message?: string };
  } | null;
  if (response.ok && body?.id) return { id: body.id, name: body.name ?? file.name };
  const said =
    body?.message ?? (typeof body?.error === "string" ? body.error : body?.error?.message);
  return { problem: `${file.name}: ${said ?? "the server did not take this file. Try again."}` };
}
