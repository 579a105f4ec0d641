import { Arg, Ctx, Mutation, Resolver } from "type-graphql";

import type { RequestContext } from "~server/common/context";
import { Requires } from "~server/common/requires";
import { acting } from "~server/event/acting";

import { previewImport, runImport } from "./import.service";
import { ImportInput, ImportPreviewResult, ImportResult } from "./import.type";

@Resolver()
export class ImportResolver {
  @Requires("runImport")
  @Mutation(() => ImportPreviewResult)
  previewImport(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => ImportInput) input: ImportInput,
  ): Promise<typeof ImportPreviewResult> {
    return previewImport(acting(ctx), input);
  }

  @Requires("runImport")
  @Mutation(() => ImportResult)
  runImport(
    @Ctx() ctx: RequestContext,
    @Arg("input", () => ImportInput) input: ImportInput,
  ): Promise<typeof ImportResult> {
    return runImport(acting(ctx), input);
  }
}
