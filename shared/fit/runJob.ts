import { background } from "~shared/cosmology/background";
import type { Task } from "~shared/inference";

import { familyOf } from "./family";
import { fit } from "./fit";
import { asFitError, FitError } from "./fitError";
import type { FitSetting } from "./posterior";
import type { EngineJob, EngineResult, FitRequest } from "./request";

/**
 * Does what the engine is asked. The result is plain data that survives JSON; equal jobs give equal results,
 * bit by bit, on one version of Node.
 *
 * @throws {FitError} In a sentence, where a job can't be done.
 */
export function* runJob(job: EngineJob): Task<EngineResult> {
  const setting = settingOf(job.request);
  switch (job.kind) {
    case "fit":
      return { kind: "fit", ...(yield* fit(setting)) };
    default:
      throw new FitError("This can't be asked yet.");
  }
}

function settingOf(request: FitRequest): FitSetting {
  try {
    return {
      request,
      family: familyOf(request.family),
      background: background(request.cosmology),
    };
  } catch (error) {
    throw asFitError(error);
  }
}
