import type { Plugin } from 'vite';
import { NOT_CHARTED } from './chart-library';

/** What most islands load, by the part of the path that tells: one file each packs tighter than forty small ones. */
const TOGETHER: readonly (readonly [name: string, test: RegExp])[] = [
  ['react', /node_modules\/(react|react-dom|scheduler|@astrojs\/react)\//],
  ['query', /node_modules\/@tanstack\//],
  [
    'common',
    /src\/(components\/ui\/(?!Dialog|Figure|Fold|Choice|Field)|lib\/(api|live|live-hook|view-in-url)\.|drawings\/(numbers|times)\.|schemas\/paths\.ts$|domain\/grouped-by\.|words\/(ui|language)\.)|vite\/preload-helper/,
  ],
];

const MODULE = /node_modules\/((?:echarts|zrender)\/lib\/[\w/]+\.js)$/;
const OURS = /\/src\/(components|domain|drawings|features|lib|schemas|words)\//;

/** How the browser's scripts are cut into files. The server's bundle is left as it comes. */
export function bundles(): Plugin {
  const left = new Set(Object.keys(NOT_CHARTED));
  return {
    name: 'wakeline:bundles',
    applyToEnvironment: (environment) => environment.name === 'client',
    load(id) {
      const module = MODULE.exec(id)?.[1] ?? '';
      left.delete(module);
      return NOT_CHARTED[module] ?? null;
    },
    buildEnd(error) {
      if (!error && left.size > 0)
        this.error(`server/chart-library.ts: not in the library: ${[...left].join(', ')}`);
    },
    // none of ours does anything by being imported: a list made at the top of a file goes where the file goes
    transform: (_, id) => (OURS.test(id) ? { moduleSideEffects: false } : null),
    outputOptions: (options) => ({
      ...options,
      manualChunks: (id) => TOGETHER.find(([, test]) => test.test(id))?.[0],
    }),
  };
}
