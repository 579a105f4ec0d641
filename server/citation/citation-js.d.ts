declare module "@citation-js/core" {
  export class Cite {
    constructor(input: string, options: { forceType: string });
    data: Record<string, unknown>[];
  }
  export const logger: { level: string };
}
declare module "@citation-js/plugin-bibtex";
