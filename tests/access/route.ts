import type { Permission } from '../../src/domain/access/permissions';

/** A site of the matrix and one of its strings, by public identifier. */
export interface Target {
  site: string;
  string: string;
}
export interface Route {
  /** The file under src/pages. */
  file: string;
  method: 'GET' | 'POST' | 'PUT' | 'PATCH' | 'DELETE';
  /** What the table of permissions must say for it; `public`: works before anybody is signed in. */
  permission: Permission | 'public';
  /** What its address names. */
  of: 'nothing' | 'site' | 'string';
  path: (target: Target) => string;
  /** As it is, or made for the target. */
  body?: unknown;
  /** Statuses that mean that somebody who may was served. */
  served: readonly number[];
  /** Where a customer is sent, who may not; left out: refused. */
  customerGoesTo?: string;
}

/** A GET of which nothing but the address is sent. */
export const get = (
  file: string,
  permission: Route['permission'],
  of: Route['of'],
  path: Route['path'],
  served: readonly number[] = [200],
): Route => ({ file, method: 'GET', permission, of, path, served });
