declare module "@citation-js/core" {
  export class Cite {
    constructor(input: string | readonly object[], options: { forceType: string });
    format(name: "bibtex"): string;
    data: Record<string, unknown>[];
  }
  export const logger: { level: string };
}
declare module "@citation-js/plugin-bibtex";
