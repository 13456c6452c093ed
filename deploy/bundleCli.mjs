// Makes the command line a few files instead of a thousand modules: a cold process spends a third of its time finding and compiling
// modules otherwise. Native parts stay outside; the JavaScript around them comes in, because Node reads CommonJS twice when a module imports
// it, once only to learn its names. Runs after tsc, as part of npm run build.
import { rmSync } from 'node:fs';
import { fileURLToPath } from 'node:url';
import { build } from 'vite';

const here = (path) => fileURLToPath(new URL(path, import.meta.url));

rmSync(here('../dist/cli/parts'), { recursive: true, force: true });
/** The drawing's specification is the same for every picture: its compiled form goes in, the compiler stays out. */
const { compiledDrawing } = await import('../dist/picture/compiledDrawing.js');
const compiledAhead = {
  name: 'compiled-drawing',
  enforce: 'pre',
  load: (id) =>
    id === here('../src/picture/compiledDrawing.ts')
      ? `export const compiledDrawing = () => (${JSON.stringify(compiledDrawing())});`
      : undefined,
};

/** Families of Vega transforms that the drawing has no use for: maps, forces, trees, clouds, …; a drawing that needed one would fail at once. */
const UNUSED_TRANSFORMS = ['crossfilter', 'force', 'geo', 'hierarchy', 'label', 'regression', 'voronoi', 'wordcloud'];
const leftOut = {
  name: 'unused-transforms',
  enforce: 'pre',
  load: (id) =>
    UNUSED_TRANSFORMS.some((family) => id.includes(`/node_modules/vega-${family}/`)) ? 'export {};' : undefined,
};

await build({
  root: here('..'),
  configFile: false,
  publicDir: false,
  plugins: [compiledAhead, leftOut],
  logLevel: 'warn',
  ssr: { noExternal: true, external: ['@duckdb/node-bindings'] },
  build: {
    ssr: true,
    target: 'node20',
    outDir: here('../dist/cli'),
    emptyOutDir: false,
    minify: true,
    rolldownOptions: {
      input: { ebb: here('../src/cli/ebb.ts') },
      output: { entryFileNames: '[name].js', chunkFileNames: 'parts/[name]-[hash].js' },
    },
  },
});
