import { Client } from 'pg';

/**
 * Everything in a database that must survive a restore, as plain values: rows of all tables, and of the
 * catalogue the columns, constraints, indexes, functions, policies and grants (without object numbers).
 */
export async function pictureOf(url: string): Promise<Record<string, unknown>> {
  const client = new Client({ connectionString: url });
  await client.connect();
  try {
    const picture: Record<string, unknown> = {};
    for (const [name, sql] of Object.entries(catalogue)) picture[name] = (await client.query(sql)).rows;
    for (const table of await tables(client)) picture[`rows of ${table}`] = await rowsOf(client, table);
    return picture;
  } finally {
    await client.end();
  }
}

const ours = "n.nspname !~ '^(pg_|information_schema)'";
const catalogue: Record<string, string> = {
  columns: `select n.nspname, c.relname, a.attname, format_type(a.atttypid, a.atttypmod) as type, a.attnotnull, pg_get_expr(d.adbin, d.adrelid) as value
    from pg_attribute a join pg_class c on c.oid = a.attrelid join pg_namespace n on n.oid = c.relnamespace
    left join pg_attrdef d on d.adrelid = a.attrelid and d.adnum = a.attnum
    where ${ours} and c.relkind in ('r', 'p', 'v') and a.attnum > 0 and not a.attisdropped order by 1, 2, a.attnum`,
  constraints: `select n.nspname, conname, conrelid::regclass::text as of, pg_get_constraintdef(c.oid) as definition
    from pg_constraint c join pg_namespace n on n.oid = c.connamespace where ${ours} order by 1, 3, 2`,
  indexes: `select schemaname, indexname, indexdef from pg_indexes n where schemaname !~ '^(pg_|information_schema)' order by 1, 2`,
  functions: `select n.nspname, p.proname, pg_get_functiondef(p.oid) as definition, pg_get_userbyid(p.proowner) as owner, (select array_agg(a::text order by a::text) from unnest(p.proacl) a) as grants
    from pg_proc p join pg_namespace n on n.oid = p.pronamespace where ${ours} and p.prokind = 'f' order by 1, 2, 3`,
  policies: 'select * from pg_policies order by schemaname, tablename, policyname',
  tables: `select n.nspname, c.relname, c.relrowsecurity, pg_get_userbyid(c.relowner) as owner, (select array_agg(a::text order by a::text) from unnest(c.relacl) a) as grants
    from pg_class c join pg_namespace n on n.oid = c.relnamespace where ${ours} and c.relkind in ('r', 'p', 'v', 'S') order by 1, 2`,
  schemas: `select nspname, (select array_agg(a::text order by a::text) from unnest(nspacl) a) as grants from pg_namespace n where ${ours} order by 1`,
  triggers: 'select tgrelid::regclass::text as of, tgname, pg_get_triggerdef(oid) as definition from pg_trigger where not tgisinternal order by 1, 2',
};

async function tables(client: Client): Promise<string[]> {
  const { rows } = await client.query<{ name: string }>(
    `select format('%I.%I', n.nspname, c.relname) as name from pg_class c join pg_namespace n on n.oid = c.relnamespace where ${ours} and c.relkind = 'r' order by 1`);
  return rows.map(({ name }) => name);
}

async function rowsOf(client: Client, table: string): Promise<string[]> {
  const { rows } = await client.query<{ row: string }>(`select t::text as row from ${table} t order by 1`);
  return rows.map(({ row }) => row);
}
