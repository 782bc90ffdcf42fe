import type pg from 'pg';

/** What a schema is made of, in words that compare: columns, constraints, indexes, triggers, functions, policies, rights. */
export async function describeSchema(db: pg.Pool): Promise<string[]> {
  const { rows } = await db.query<{ line: string }>(`
    select 'column ' || c.relname || '.' || a.attname || ' ' || format_type(a.atttypid, a.atttypmod)
           || case when a.attnotnull then ' not null' else '' end
           || coalesce(' default ' || pg_get_expr(d.adbin, d.adrelid), '') as line
      from pg_class c join pg_attribute a on a.attrelid = c.oid left join pg_attrdef d on d.adrelid = c.oid and d.adnum = a.attnum
     where c.relnamespace = 'public'::regnamespace and c.relkind in ('r', 'p', 'v') and a.attnum > 0 and not a.attisdropped
    union all
    select 'constraint ' || conrelid::regclass || ' ' || conname || ' ' || pg_get_constraintdef(oid)
      from pg_constraint where connamespace = 'public'::regnamespace
    union all select 'index ' || indexdef from pg_indexes where schemaname = 'public'
    union all select 'trigger ' || pg_get_triggerdef(t.oid) from pg_trigger t where not tgisinternal
    union all
    select 'function ' || p.oid::regprocedure || ' ' || md5(p.prosrc) || ' ' || (select string_agg(x::text, ',' order by x::text) from unnest(coalesce(p.proacl, acldefault('f', p.proowner))) x)
      from pg_proc p
     where p.pronamespace = 'public'::regnamespace
       and not exists (select from pg_depend e where e.objid = p.oid and e.deptype = 'e')
    union all
    select 'policy ' || tablename || ' ' || policyname || ' ' || roles::text || ' ' || coalesce(qual, '') || ' ' || coalesce(with_check, '')
      from pg_policies where schemaname = 'public'
    union all
    select 'rights ' || relname || ' ' || (select string_agg(x::text, ',' order by x::text)
             from unnest(coalesce(relacl, acldefault(case relkind when 'S' then 's' else 'r' end::"char", relowner))) x) || ' rls=' || relrowsecurity
      from pg_class where relnamespace = 'public'::regnamespace and relkind in ('r', 'p', 'v', 'S')
    order by 1`);
  return rows.map(({ line }) => line).filter((line) => !/\bknex_migrations/.test(line));
}
