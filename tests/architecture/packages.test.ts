import fs from 'node:fs';
import path from 'node:path';
import { describe, expect, it } from 'vitest';
import { ROOT } from './sources';

/** What is taken from others, as far as it can be told without asking anybody: from the lock file alone. */
interface Locked {
  version?: string;
  resolved?: string;
  integrity?: string;
  license?: string;
  link?: boolean;
  dev?: boolean;
  hasInstallScript?: boolean;
}
interface Manifest {
  dependencies: Record<string, string>;
  devDependencies: Record<string, string>;
  allowScripts: Record<string, boolean>;
}
const json = (file: string): unknown => JSON.parse(fs.readFileSync(path.join(ROOT, file), 'utf8'));
const manifest = json('package.json') as Manifest;
const lock = json('package-lock.json') as { lockfileVersion: number; packages: Record<string, Locked> };
const packages = Object.entries(lock.packages).filter(([place]) => place !== '');
const nameOf = (place: string): string => place.slice(place.lastIndexOf('node_modules/') + 13);

/** Licences that ask for a notice at most. */
const FREE = [
  '0BSD',
  'Apache-2.0',
  'BSD-2-Clause',
  'BSD-3-Clause',
  'BlueOak-1.0.0',
  'CC0-1.0',
  'ISC',
  'MIT',
  'MIT-0',
  'Python-2.0',
  'Unlicense',
  'Zlib',
];
/** Others, each for a reason. */
const LOOKED_AT: Record<string, RegExp> = {
  'OFL-1.1': /^@fontsource/, // the typeface, unchanged and not sold by itself
  'CC-BY-4.0': /^caniuse-lite$/, // data of the build, named by it
  'MPL-2.0': /^axe-core$|^lightningcss/, // of tests and builds, unchanged
  'LGPL-3.0-or-later': /^@img\/sharp-/, // libvips as a library of its own that can be exchanged
};
/** Of which the lock file says nothing: read in its LICENSE file; as its repository says (an option of Astro, not installed). */
const SILENT: Record<string, string> = { 'png-js': 'MIT', 'zod-to-ts': 'MIT' };

const licenceFault = (name: string, licence: string): boolean => {
  const said = licence.replace(/^\(|\)$/g, '');
  if (said.includes(' OR ')) return said.split(' OR ').every((one) => licenceFault(name, one));
  if (said.includes(' AND ')) return said.split(' AND ').some((one) => licenceFault(name, one));
  return !FREE.includes(said) && !LOOKED_AT[said]?.test(name);
};

describe('packages of others', () => {
  it('are pinned to a version, and the lock file holds that one', () => {
    const wanted = { ...manifest.dependencies, ...manifest.devDependencies };
    for (const [name, version] of Object.entries(wanted)) {
      // a second version of a package stands beside the first under a name of ours
      const pinned = version.replace(/^npm:[\w/@-]+@/, '');
      expect(pinned, name).toMatch(/^\d+\.\d+\.\d+(-[\w.]+)?$/);
      expect(lock.packages[`node_modules/${name}`]?.version, name).toBe(pinned);
    }
  });

  it('are known by the hash of their content', () => {
    expect(lock.lockfileVersion).toBe(3);
    expect(packages.length).toBeGreaterThan(100);
    const without = packages.filter(
      ([, p]) => !/^sha512-[A-Za-z0-9+/]{86}==( |$)/.test(p.integrity ?? '') || p.link,
    );
    expect(without.map(([place]) => place)).toEqual([]);
  });

  it('come from the registry: from no repository, address or folder', () => {
    // the lock file names no address at all: what has none comes from the registry that is set, by its hash
    const elsewhere = packages.filter(([, p]) => p.resolved !== undefined);
    expect(elsewhere.map(([place, p]) => `${place}: ${p.resolved}`)).toEqual([]);
  });

  it('run nothing when they are installed, but for those that are allowed to', () => {
    const allowed = Object.entries(manifest.allowScripts).flatMap(([name, yes]) => (yes ? [name] : []));
    const running = packages.filter(([, p]) => p.hasInstallScript).map(([place]) => nameOf(place));
    expect([...new Set(running)].filter((name) => !allowed.includes(name))).toEqual([]);
    expect(allowed.filter((name) => !running.includes(name))).toEqual([]);
  });

  it('may be used as they are used here', () => {
    const faults = packages.flatMap(([place, { license }]) => {
      const name = nameOf(place);
      const said = license ?? SILENT[name] ?? 'none';
      return licenceFault(name, said) ? [`${name}: ${said}`] : [];
    });
    expect([...new Set(faults)]).toEqual([]);
  });
});
