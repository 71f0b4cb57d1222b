import {
  mkdtempSync,
  rmSync,
  unlinkSync,
  writeFileSync,
  copyFileSync,
  cpSync,
  readdirSync,
  readFileSync,
} from 'node:fs';
import os from 'node:os';
import path from 'node:path';
import { lockDataDir } from '@/db/lockDataDir';
import { migrateDatabase } from '@/db/migrate';
import { openDatabase, StoreGoneError, type Store } from '@/db/openDatabase';
import { recordAct } from '@/db/audit';

const migrations = path.resolve(__dirname, '../../../db/migrations');
let dir: string;
let store: Store;

beforeEach(() => {
  dir = mkdtempSync(path.join(os.tmpdir(), 'combwright-db-'));
  store = openDatabase(path.join(dir, 'combwright.db'));
});
afterEach(() => {
  store.close();
  rmSync(dir, { recursive: true, force: true });
});

/** One row in every table, each pointing at the next. */
function fillEveryTable(): void {
  const { sqlite } = store;
  const hash = 'f'.repeat(64);
  sqlite.exec(`
    insert into users (id, email, name, created_at_ms) values ('u1', 'a@example.org', 'A', 1), ('u2', 'b@example.org', 'B', 2);
    insert into user_roles values ('u1', 'author', 1), ('u2', 'reviewer', 1);
    insert into sessions values ('${hash}', 'u1', 9, 's1', 1, 1, 'x');
    insert into one_time_links values ('l1', '${hash}', 'invite', 'u2', 'u1', 1, 2, null, null);
    insert into installation (id, kind, created_at_ms) values (1, 'team', 1);
    insert into idempotency_keys values ('u1', 'saveRevision', 'key-1234', '${hash}', 'r1', 1);
    insert into waveforms values ('w1', 'u1', 1, 'r1', 'T', 1);
    insert into contents values ('sha256:${hash}', x'00', 1, 1);
    insert into content_figures values ('sha256:${hash}', '1', '{}', 1);
    insert into revisions values ('r1', 'w1', 1, null, 0, 'sha256:${hash}', 'i', 'd', 'T', '{}', '{}', 'u1', 1);
    insert into revision_states values (null, 'r1', 'released', 'released', '', 'u2', 2);
    insert into review_requests (id, waveform_id, revision_id, note, asked_by, asked_at_ms) values ('q1', 'w1', 'r1', '', 'u1', 1);
    insert into editions values ('e1', 'w1', 1, 'r1', 'T', 'sha256:${hash}', 'u2', 2, '');
    insert into withdrawals values ('e1', 'why', 'u2', 3);
    insert into bench_profiles values ('b1', 'u2', 1, 'v1');
    insert into bench_profile_versions values ('v1', 'b1', 1, 'Bench', '{}', 'c', 'f', 'u2', 1);
    insert into packs values ('p1', 'k', 'r1', 'e1', 'v1', 'a.zip', 'packs/k', 1, 's', 'v', '{}', 'u1', 1);
    insert into pack_jobs (id, pack_key, revision_id, profile_version_id, asked_by, state, created_at_ms) values ('j1', 'k', 'r1', 'v1', 'u1', 'done', 1);
    insert into device_cards values ('d1', 'p1', 'Device', '{}', 'u1', 1);
  `);
  store.write((tx) =>
    recordAct(tx, {
      atMs: 1,
      personId: 'u1',
      act: 'person.joined',
      objectKind: 'person',
      objectId: 'u1',
      objectLabel: 'A',
    }),
  );
}

const names = (type: string) =>
  (
    store.sqlite
      .prepare(
        `select name from sqlite_master where type = ? and name not like 'sqlite_%' and name not like '__drizzle%' order by name`,
      )
      .all(type) as { name: string }[]
  ).map((row) => row.name);

const APPEND_ONLY = [
  'audit',
  'bench_profile_versions',
  'contents',
  'device_cards',
  'editions',
  'revision_states',
  'revisions',
  'withdrawals',
];

describe('after every migration', () => {
  beforeEach(() => migrateDatabase(store, migrations));

  it('the triggers are these', () => {
    expect(names('trigger')).toEqual(APPEND_ONLY.flatMap((table) => [`${table}_no_delete`, `${table}_no_update`]));
  });

  it.each(APPEND_ONLY)('%s takes new rows and nothing else', (table) => {
    fillEveryTable();
    const [column] = store.sqlite.pragma(`table_info(${table})`) as { name: string }[];
    const row = () => store.sqlite.prepare(`select * from ${table}`).all();
    const before = row();
    expect(before.length).toBeGreaterThan(0);
    expect(() => store.sqlite.exec(`update ${table} set ${column?.name} = ${column?.name}`)).toThrow(/never changes/);
    expect(() => store.sqlite.exec(`delete from ${table}`)).toThrow(/never goes/);
    // Replacing is deleting: without recursive triggers it would pass.
    expect(() => store.sqlite.exec(`insert or replace into ${table} select * from ${table}`)).toThrow(/never goes/);
    expect(row()).toEqual(before);
  });

  it('one open review a waveform, any number of closed ones', () => {
    fillEveryTable();
    const ask = (id: string) =>
      store.sqlite.exec(
        `insert into review_requests (id, waveform_id, revision_id, note, asked_by, asked_at_ms) values ('${id}', 'w1', 'r1', '', 'u1', 2)`,
      );
    expect(() => ask('q2')).toThrow(/UNIQUE/);
    store.sqlite.exec(`update review_requests set outcome = 'returned'`);
    ask('q2');
  });

  it('foreign keys are on', () => {
    expect(() => store.sqlite.exec(`insert into user_roles values ('nobody', 'author', 1)`)).toThrow(/FOREIGN KEY/);
  });

  it('unknown roles and states are refused', () => {
    fillEveryTable();
    expect(() => store.sqlite.exec(`insert into user_roles values ('u1', 'owner', 1)`)).toThrow(/CHECK/);
    expect(() =>
      store.sqlite.exec(`insert into revision_states values (null, 'r1', 'lost', 'saved', '', 'u1', 1)`),
    ).toThrow(/CHECK/);
  });
});

describe('a seeded copy', () => {
  const counts = () =>
    Object.fromEntries(
      names('table').map((table) => [
        table,
        (store.sqlite.prepare(`select count(*) n from ${table}`).get() as { n: number }).n,
      ]),
    );

  it('loses no row when migrated again, and every table of it is filled', () => {
    migrateDatabase(store, migrations);
    fillEveryTable();
    const before = counts();
    expect(Object.entries(before).filter(([, n]) => n === 0)).toEqual([]);
    store.sqlite.pragma('wal_checkpoint(TRUNCATE)');
    store.close();
    copyFileSync(path.join(dir, 'combwright.db'), path.join(dir, 'copy.db'));
    store = openDatabase(path.join(dir, 'copy.db'));
    migrateDatabase(store, migrations);
    expect(counts()).toEqual(before);
  });

  it('survives a table rebuilt by a later migration, references and all', () => {
    migrateDatabase(store, migrations);
    fillEveryTable();
    const before = counts();
    const later = withMigration(`
      CREATE TABLE __new_users (id text PRIMARY KEY NOT NULL, email text NOT NULL UNIQUE, name text NOT NULL, password_hash text,
        is_demo integer DEFAULT false NOT NULL, created_at_ms integer NOT NULL, last_seen_at_ms integer, nickname text);
      --> statement-breakpoint
      INSERT INTO __new_users SELECT *, null FROM users;
      --> statement-breakpoint
      DROP TABLE users;
      --> statement-breakpoint
      ALTER TABLE __new_users RENAME TO users;`);
    migrateDatabase(store, later);
    expect(counts()).toEqual(before);
    expect(store.sqlite.pragma('foreign_key_check')).toEqual([]);
    expect(store.sqlite.pragma('foreign_keys', { simple: true })).toBe(1);
  });

  it('refuses a migration that leaves rows pointing at nothing', () => {
    migrateDatabase(store, migrations);
    fillEveryTable();
    expect(() => migrateDatabase(store, withMigration("DELETE FROM users WHERE id = 'u1';"))).toThrow(
      /point at nothing/,
    );
  });
});

/** A copy of the migrations with one more at the end. */
function withMigration(sql: string): string {
  const copy = path.join(dir, 'migrations');
  cpSync(migrations, copy, { recursive: true });
  const journalFile = path.join(copy, 'meta/_journal.json');
  const journal = JSON.parse(readFileSync(journalFile, 'utf8')) as {
    entries: { idx: number; when: number; tag: string; version: string; breakpoints: boolean }[];
  };
  const last = journal.entries.at(-1);
  journal.entries.push({
    idx: journal.entries.length,
    version: '6',
    when: (last?.when ?? 0) + 1,
    tag: '9999_later',
    breakpoints: true,
  });
  writeFileSync(journalFile, JSON.stringify(journal));
  writeFileSync(path.join(copy, '9999_later.sql'), sql);
  return copy;
}

describe('the store', () => {
  beforeEach(() => migrateDatabase(store, migrations));

  it('keeps nothing of a write that throws', () => {
    fillEveryTable();
    expect(() =>
      store.write((tx) => {
        recordAct(tx, { atMs: 2, personId: null, act: 'a.b', objectKind: 'a', objectId: null, objectLabel: '' });
        throw new Error('no');
      }),
    ).toThrow('no');
    expect((store.sqlite.prepare('select count(*) n from audit').get() as { n: number }).n).toBe(1);
  });

  it.each(['removed', 'replaced'])('writes no more when its file was %s', (how) => {
    const file = path.join(dir, 'watched.db');
    let toldCount = 0;
    const watched = openDatabase(file, () => (toldCount += 1));
    migrateDatabase(watched, migrations);
    unlinkSync(file);
    if (how === 'replaced') writeFileSync(file, 'another file');
    expect(() => watched.write(() => 1)).toThrow(StoreGoneError);
    expect(toldCount).toBe(1);
    watched.close();
  });
});

describe('the lock on a data directory', () => {
  it('has one holder, and is free again when it lets go', () => {
    const first = lockDataDir(dir);
    expect(first).not.toBeNull();
    expect(lockDataDir(dir)).toBeNull();
    first?.release();
    const second = lockDataDir(dir);
    expect(second).not.toBeNull();
    second?.release();
  });
});

it('every migration file stands in the journal', () => {
  const journal = JSON.parse(readFileSync(path.join(migrations, 'meta/_journal.json'), 'utf8')) as {
    entries: { tag: string }[];
  };
  const files = readdirSync(migrations).filter((name) => name.endsWith('.sql'));
  expect(files).toEqual(journal.entries.map((entry) => `${entry.tag}.sql`));
});
