import { vi } from 'vitest';

/**
 * Files of a project share a process, so that packages are read once. None finds what another left in the product's
 * modules, which are made anew, in what the product keeps for the whole process, or in the environment.
 */
const KEY = Symbol.for('wakeline.test.environment');
const shared = globalThis as unknown as Record<symbol, NodeJS.ProcessEnv | undefined>;
const before = (shared[KEY] ??= { ...process.env });

const isVitests = (name: string): boolean => name.startsWith('VITEST');
for (const name of Object.keys(process.env))
  if (!isVitests(name) && !(name in before)) Reflect.deleteProperty(process.env, name);
for (const [name, value] of Object.entries(before)) if (!isVitests(name)) process.env[name] = value;

for (const kept of Object.getOwnPropertySymbols(globalThis))
  if (kept !== KEY && kept.description?.startsWith('wakeline.')) Reflect.deleteProperty(globalThis, kept);

vi.resetModules();
