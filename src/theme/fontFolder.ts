/** Written by scripts/copyFonts.mjs; do not edit. Where the font files are served from. */
export const fontFolder = "/assets/type-5.3.1";
