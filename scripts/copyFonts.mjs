/**
 * Copies the font files in use from the Fontsource packages to public/assets and writes their
 * @font-face rules, so that the packages' pins and the shipped files agree.
 * Run: node scripts/copyFonts.mjs
 */
import { cp, mkdir, readFile, rm, writeFile } from "node:fs/promises";
import { createRequire } from "node:module";
import path from "node:path";
import { fileURLToPath } from "node:url";

const require = createRequire(import.meta.url);
const root = fileURLToPath(new URL("..", import.meta.url));

/** Weight and style of each face in use, by package. */
const FACES = {
  "source-serif-4": {
    family: "Source Serif 4",
    faces: ["400-normal", "400-italic", "600-normal"],
    subsets: ["latin", "latin-ext", "greek"],
  },
  "source-sans-3": {
    family: "Source Sans 3",
    faces: ["400-normal", "400-italic", "600-normal"],
    subsets: ["latin", "latin-ext", "greek"],
  },
  "source-code-pro": {
    family: "Source Code Pro",
    faces: ["400-normal", "500-normal"],
    subsets: ["latin"],
  },
};

// The folder carries the version, since files under /assets are served as immutable.
const version = require("@fontsource/source-sans-3/package.json").version;
const folder = `assets/type-${version}`;
const target = path.join(root, "public", folder);
await rm(target, { recursive: true, force: true });
await mkdir(target, { recursive: true });

const rules = [];
for (const [name, { family, faces, subsets }] of Object.entries(FACES)) {
  const home = path.dirname(require.resolve(`@fontsource/${name}/package.json`));
  const ranges = JSON.parse(await readFile(path.join(home, "unicode.json"), "utf8"));
  for (const face of faces) {
    for (const subset of subsets) {
      const file = `${name}-${subset}-${face}.woff2`;
      await cp(path.join(home, "files", file), path.join(target, file));
      const [weight, style] = face.split("-");
      rules.push(`@font-face {
  font-family: "${family}";
  font-style: ${style};
  font-weight: ${weight};
  font-display: swap;
  src: url("/${folder}/${file}") format("woff2");
  unicode-range: ${ranges[subset]};
}`);
    }
  }
  await cp(path.join(home, "LICENSE"), path.join(target, `${name}-LICENSE.txt`));
}
await writeFile(
  path.join(root, "src/theme/fonts.css"),
  `/* Written by scripts/copyFonts.mjs; do not edit. */\n${rules.join("\n")}\n`,
);
await writeFile(
  path.join(root, "src/theme/fontFolder.ts"),
  `/** Written by scripts/copyFonts.mjs; do not edit. Where the font files are served from. */
export const fontFolder = "/${folder}";
`,
);
console.log(`${rules.length} faces in public/${folder}`);
