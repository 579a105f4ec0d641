import type { Request, Response } from "express";
import multer, { MulterError } from "multer";

import { HttpProblem } from "~server/common/errors";
import { requireMay } from "~server/http/context";
import type { RouteInstaller } from "~server/routes";

import { uploadedName, uploadedText } from "./content";
import { UPLOAD_KINDS } from "./upload.entity";
import { storeUpload } from "./upload.service";

const MAX_BYTES = 1_000_000;

const receive = multer({
  storage: multer.memoryStorage(),
  // Names of files are UTF-8; multer reads them as Latin-1 unless told.
  defParamCharset: "utf8",
  limits: { fileSize: MAX_BYTES, files: 1, fields: 4, fieldSize: 100, parts: 5 },
}).single("file");

/** POST /api/uploads: one file of at most 1 MB in `file`, its kind in `kind`. */
export const uploadRoutes: RouteInstaller = (router, parts) => {
  router.post("/api/uploads", async (req, res) => {
    // Asked before the file is read: a stranger's bytes are not even collected.
    const { id: ownerId } = requireMay(await parts.context(req, res), "runImport");
    await received(req, res);
    const kind = UPLOAD_KINDS.find((word) => word === req.body?.kind);
    if (!kind) {
      throw new HttpProblem(400, "UNREADABLE_FILE", "Say in `kind` what the file is: csv or bib.");
    }
    if (!req.file) {
      throw new HttpProblem(400, "UNREADABLE_FILE", "Send the file in the field `file`.");
    }
    const upload = await storeUpload(parts.database.manager, {
      ownerId,
      kind,
      name: uploadedName(req.file.originalname),
      text: uploadedText(req.file.buffer, kind),
    });
    res.status(201).json({ id: upload.id, name: upload.name });
  });
};

function received(req: Request, res: Response): Promise<void> {
  return new Promise((resolve, reject) => {
    receive(req, res, (error: unknown) => {
      if (!error) resolve();
      else if (error instanceof MulterError && error.code === "LIMIT_FILE_SIZE") {
        reject(new HttpProblem(413, "FILE_TOO_LARGE", "The file is larger than 1 MB."));
      } else {
        const sentence = "The file did not arrive whole. Send one file as multipart/form-data.";
        reject(new HttpProblem(400, "UNREADABLE_FILE", sentence));
      }
    });
  });
}
