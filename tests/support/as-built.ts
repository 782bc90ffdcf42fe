import type { Actor } from '../../src/domain/access/permissions';
import { PART_DEFAULTS, type PartKind } from '../../src/domain/commissioning/as-built/parts';
import { asBuilt, type AsBuilt, type PartAdded, type PartValues } from '../../src/schemas/api/as-built';
import { POST as postSite } from '../../src/pages/api/sites/index';
import { GET as getAsBuilt } from '../../src/pages/api/sites/[site]/as-built/index';
import { POST as postPart } from '../../src/pages/api/sites/[site]/as-built/parts/index';
import {
  DELETE as deletePart,
  PATCH as patchPart,
} from '../../src/pages/api/sites/[site]/as-built/parts/[part]';
import type { TestDatabase } from './database';
import { ask } from './endpoint';

/** Building a site through its API, as a form does. */

export interface Problem {
  status: number;
  detail: string;
  fields: { field: string; message: string }[];
}
export interface Reply<T> {
  status: number;
  data: T;
  problem: Problem;
}

export async function call<T>(
  route: Parameters<typeof ask>[0],
  asked: Parameters<typeof ask>[1],
): Promise<Reply<T>> {
  const response = await ask(route, asked);
  const text = await response.text();
  const json: unknown = text === '' ? undefined : JSON.parse(text);
  return { status: response.status, data: json as T, problem: json as Problem };
}

/** The fields that a refusal names. */
export const only = (reply: Reply<unknown>): string[] => reply.problem.fields.map((f) => f.field);

export const newSite = (actor: Actor, values: PartValues): Promise<Reply<{ id: string }>> =>
  call(postSite, {
    actor,
    method: 'POST',
    body: {
      values: {
        ...PART_DEFAULTS.site,
        latitude: 51.4,
        longitude: -2.6,
        timeZone: 'Europe/London',
        ...values,
      },
    },
  });

/** Somebody who manages another organisation. */
export async function strangerIn(db: TestDatabase): Promise<Actor> {
  const { rows } = await db.owner.query<{ org: number; person: number }>(
    `with o as (insert into organisation (name) values ('Elsewhere and Daughters') returning id)
     insert into person (organisation_id, email, name, role, password_hash)
     select id, 'elsewhere@elsewhere.example', 'Esme Elsewhere', 'manager', '!' from o
     returning organisation_id as org, id as person`,
  );
  const [row] = rows;
  if (!row) throw new Error('nobody was written');
  return { personId: row.person, organisationId: row.org, role: 'manager', sites: 'all' };
}

interface More {
  alike?: number;
  inTurn?: boolean;
  reason?: string;
  at?: string;
  actor?: Actor;
}

/** What a technician does to one site, both asked for at each call; `at` and `actor` take another. */
export function siteForms(of: () => { technician: Actor; site: string }) {
  const built = async (at = of().site): Promise<AsBuilt> => {
    const { data } = await call<AsBuilt>(getAsBuilt, { actor: of().technician, params: { site: at } });
    return asBuilt.parse(data);
  };
  return {
    built,
    add: (
      kind: Exclude<PartKind, 'site'>,
      values: PartValues,
      more: More = {},
    ): Promise<Reply<PartAdded>> => {
      const { at = of().site, actor = of().technician, ...rest } = more;
      return call(postPart, {
        actor,
        params: { site: at },
        method: 'POST',
        body: { kind, values: { ...PART_DEFAULTS[kind], ...values }, ...rest },
      });
    },
    change: (
      kind: PartKind,
      part: string,
      before: PartValues,
      after: PartValues,
      { actor = of().technician, reason = '', at = of().site } = {},
    ): Promise<Reply<undefined>> =>
      call(patchPart, {
        actor,
        params: { site: at, part },
        method: 'PATCH',
        body: { kind, before, after, reason },
      }),
    remove: (
      kind: PartKind,
      part: string,
      { reason = '', at = of().site, actor = of().technician } = {},
    ): Promise<Reply<undefined>> =>
      call(deletePart, { actor, params: { site: at, part }, method: 'DELETE', body: { kind, reason } }),
    /** A string on the site's first parts, of units that report. */
    stringValues: async (some: PartValues = {}): Promise<PartValues> => {
      const b = await built();
      const first = <T extends { id: string }>(list: readonly T[]): string | null => list[0]?.id ?? null;
      return {
        name: 'A1',
        slots: 4,
        unitType: first(b.catalogue.unitTypes.filter((t) => t.kind === 'monitored')),
        moduleType: first(b.catalogue.moduleTypes),
        plane: first(b.planes),
        input: first(b.inverters[0]?.inputs ?? []),
        zone: first(b.zones),
        logger: first(b.loggers),
        ...some,
      };
    },
  };
}
