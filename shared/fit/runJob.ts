import { background } from "~shared/cosmology/background";
import type { Task } from "~shared/inference";

import { withOtherChoices } from "./choices";
import { familyOf } from "./family";
import { fit } from "./fit";
import { fitFamilies } from "./families";
import { asFitError } from "./fitError";
import { withoutEach } from "./leaveOneOut";
import type { FitSetting } from "./posterior";
import type { EngineJob, EngineResult, FitRequest } from "./request";
import { whatChanged } from "./whatChanged";

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
    case "families":
      return yield* fitFamilies(setting);
    case "leaveOneOut":
      return yield* withoutEach(setting);
    case "choices":
      return yield* withOtherChoices(setting, job.others);
    case "whatChanged":
      return yield* whatChanged(setting, job.before);
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
