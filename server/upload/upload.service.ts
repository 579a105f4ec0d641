import { LessThan, type EntityManager } from "typeorm";

import { Upload, type UploadKind } from "./upload.entity";

const KEPT_DAYS = 7;
/** Files one person may have waiting; the oldest goes. */
const KEPT_FILES = 20;

export interface NewUpload {
  ownerId: string;
  name: string;
  kind: UploadKind;
  text: string;
}

export async function storeUpload(manager: EntityManager, file: NewUpload): Promise<Upload> {
  const now = new Date();
  await manager.delete(Upload, { expiresAt: LessThan(now) });
  const expiresAt = new Date(now.getTime() + KEPT_DAYS * 86_400_000);
  const upload = await manager.save(manager.create(Upload, { ...file, expiresAt }));
  const waiting = await manager.find(Upload, {
    select: { id: true },
    where: { ownerId: file.ownerId },
    order: { createdAt: "DESC", id: "ASC" },
    skip: KEPT_FILES,
    take: 100,
  });
  if (waiting.length > 0) {
    await manager.delete(
      Upload,
      waiting.map((old) => old.id),
    );
  }
  return upload;
}

/** A person's own file of this kind, or null: unknown, somebody else's, another kind, or expired. */
export async function findUpload(
  manager: EntityManager,
  ownerId: string,
  id: string,
  kind: UploadKind,
): Promise<Upload | null> {
  const upload = await manager.findOneBy(Upload, { id, ownerId, kind });
  return upload && upload.expiresAt > new Date() ? upload : null;
}
