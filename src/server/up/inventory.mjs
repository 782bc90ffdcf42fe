/**
 * What a database holds, in figures that two databases can be compared by: rows and a checksum of each table, whatever
 * order they come in; who may do what; what keeps data in order; how far sequences are.
 */
const OWN = `n.nspname !~ '^pg_' and n.nspname <> 'information_schema'`;

const TABLES = `select format('%I.%I', n.nspname, c.relname) as name from pg_class c join pg_namespace n on n.oid = c.relnamespace
  where c.relkind in ('r', 'p') and not c.relispartition and ${OWN} order by 1`;

/** Each gives one line of text a thing; both databases must have the same lines. */
const RULES = {
  column: `select format('%s.%s.%s %s %s %s', n.nspname, c.relname, a.attname, format_type(a.atttypid, a.atttypmod), a.attnotnull,
             pg_get_expr(d.adbin, d.adrelid))
           from pg_attribute a join pg_class c on c.oid = a.attrelid join pg_namespace n on n.oid = c.relnamespace
             left join pg_attrdef d on d.adrelid = a.attrelid and d.adnum = a.attnum
           where a.attnum > 0 and not a.attisdropped and c.relkind in ('r', 'p', 'v') and ${OWN}`,
  policy: `select format('%s.%s %s %s %s %s %s %s', schemaname, tablename, policyname, permissive, roles, cmd, qual, with_check) from pg_policies`,
  'row security': `select format('%s.%s %s %s', n.nspname, c.relname, c.relrowsecurity, c.relforcerowsecurity)
           from pg_class c join pg_namespace n on n.oid = c.relnamespace where c.relkind in ('r', 'p') and ${OWN}`,
  grant: `select format('%s.%s %s %s', n.nspname, c.relname, pg_get_userbyid(c.relowner), acl)
           from pg_class c join pg_namespace n on n.oid = c.relnamespace
             left join lateral unnest(c.relacl) acl on true where c.relkind in ('r', 'p', 'v', 'S') and ${OWN}`,
  function: `select format('%s.%s(%s) %s %s %s', n.nspname, p.proname, pg_get_function_identity_arguments(p.oid),
             pg_get_userbyid(p.proowner), acl, md5(p.prosrc))
           from pg_proc p join pg_namespace n on n.oid = p.pronamespace left join lateral unnest(p.proacl) acl on true
           where ${OWN} and not exists (select from pg_depend d where d.objid = p.oid and d.deptype = 'e')`,
  constraint: `select format('%s %s %s', conrelid::regclass, conname, pg_get_constraintdef(c.oid))
           from pg_constraint c join pg_namespace n on n.oid = c.connamespace where ${OWN}`,
  index: `select indexdef from pg_indexes n where schemaname !~ '^pg_'`,
  trigger: `select format('%s %s', tgrelid::regclass, pg_get_triggerdef(t.oid)) from pg_trigger t where not tgisinternal`,
  extension: `select format('%s %s', extname, extversion) from pg_extension`,
  role: `select format('%s %s %s %s %s %s', rolname, rolsuper, rolcreaterole, rolcreatedb, rolcanlogin, rolbypassrls) from pg_roles
           where rolname !~ '^pg_'`,
  membership: `select format('%s in %s', pg_get_userbyid(member), pg_get_userbyid(roleid)) from pg_auth_members
           where pg_get_userbyid(member) !~ '^pg_'`,
};

/** Name → position of every sequence; not part of any snapshot. */
export async function sequencesOf(db) {
  const { rows } = await db.query(
    `select format('%I.%I', schemaname, sequencename) as name, coalesce(last_value, 0)::text as value from pg_sequences`,
  );
  return new Map(rows.map((r) => [r.name, BigInt(r.value)]));
}

/** @returns tables (name → { rows, sum }), rules (kind → lines), newest (instant of the newest readings) */
export async function inventoryOf(db) {
  const { rows: names } = await db.query(TABLES);
  const tables = new Map();
  for (const { name } of names) {
    const { rows } = await db.query(
      `select count(*)::text as rows, coalesce(sum(hashtextextended(t::text, 0)::numeric), 0)::text as sum from ${name} t`,
    );
    tables.set(name, rows[0]);
  }
  const rules = new Map();
  for (const [kind, sql] of Object.entries(RULES)) {
    const { rows } = await db.query({ text: sql, rowMode: 'array' });
    rules.set(kind, rows.map(([line]) => line).sort());
  }
  const { rows } = await db.query(
    `select max(at)::text as newest, count(*)::int as strings from string_state`,
  );
  return { tables, rules, newest: rows[0] };
}

/** Tables whose rows are the server's own business, and differ between any two. */
const differsBy = (a, b) => a.rows !== b.rows || a.sum !== b.sum;

/** What is not the same in both, one a line; empty: they are alike. */
export function differences(kept, restored) {
  const found = [];
  for (const [name, is] of kept.tables) {
    const there = restored.tables.get(name);
    if (!there) found.push(`${name} is missing`);
    else if (differsBy(is, there))
      found.push(`${name}: ${is.rows} rows (${is.sum}) became ${there.rows} (${there.sum})`);
  }
  for (const name of restored.tables.keys())
    if (!kept.tables.has(name)) found.push(`${name} came from nowhere`);
  for (const [kind, lines] of kept.rules) {
    const there = new Set(restored.rules.get(kind));
    const had = new Set(lines);
    for (const line of had) if (!there.has(line)) found.push(`${kind} is missing: ${line}`);
    for (const line of there) if (!had.has(line)) found.push(`${kind} came from nowhere: ${line}`);
  }
  if (kept.newest.newest !== restored.newest.newest)
    found.push(`the newest reading is of ${restored.newest.newest} instead of ${kept.newest.newest}`);
  return found;
}

/** Sequences that stand before where they stood: they would give numbers a second time. */
export function sequencesBehind(kept, restored) {
  return [...kept].flatMap(([name, value]) => {
    const there = restored.get(name);
    return there === undefined || there < value
      ? [`sequence ${name} stood at ${value}, and stands at ${there}`]
      : [];
  });
}
