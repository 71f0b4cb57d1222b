import { recordAct } from '@/db/audit';
import type { Queryable } from '@/db/openDatabase';
import type { Bench, BenchItem, BenchVersion } from '@/lib/contracts/benches';
import { benchWarnings } from '@/lib/contracts/benchWarnings';
import { canonicalJson, profileDigest, profileFileDigest } from '@/lib/document/digest';
import type { BenchProfile } from '@/lib/synth';
import { requireRight, type Actor } from '../../auth/actor.ts';
import { authorizeRead } from '../../auth/authorized.ts';
import type { Deps } from '../../deps.ts';
import { findResult, rememberResult, type KeyedRequest } from '../../idempotencyRepo.ts';
import { DomainError } from '../../problem.ts';
import * as repo from './repo.ts';

interface Sent {
  requestId: string | null;
  idempotencyKey: string | null;
}

const profileOf = (row: repo.BenchVersionRow) => JSON.parse(row.profileJson) as BenchProfile;

function toVersion(row: repo.BenchVersionRow): BenchVersion {
  return {
    version: row.version,
    profileDigest: row.fileDigest,
    savedBy: { personId: row.savedBy, name: row.savedByName },
    savedAtMs: row.savedAtMs,
    packCount: row.packCount,
  };
}

export function createBenchesService(deps: Deps) {
  const { store, clock } = deps;

  function show(actor: Actor, benchId: string, version?: number): Bench {
    const row = authorizeRead(actor, 'readBenches', repo.findVersion(store.db, benchId, version));
    const versions = repo.listVersions(store.db, benchId);
    const profile = profileOf(row);
    return {
      benchId,
      name: versions[0]!.name,
      versions: versions.map(toVersion),
      shown: { version: row.version, profile },
      warnings: benchWarnings(profile.content),
    };
  }

  function addVersion(tx: Queryable, actor: Actor, benchId: string, number: number, profile: BenchProfile, sent: Sent) {
    const nowMs = clock.nowMs();
    repo.insertVersion(tx, {
      id: deps.newId(),
      profileId: benchId,
      number,
      name: profile.about.name,
      profileJson: canonicalJson(profile),
      contentDigest: profileDigest(profile.content),
      fileDigest: profileFileDigest(profile),
      savedBy: actor.personId,
      savedAtMs: nowMs,
    });
    recordAct(tx, {
      atMs: nowMs,
      personId: actor.personId,
      act: number === 1 ? 'bench.created' : 'bench.saved',
      objectKind: 'bench',
      objectId: benchId,
      objectLabel: `${profile.about.name}, version ${number}`,
      requestId: sent.requestId,
    });
  }

  const keyed = (actor: Actor, endpoint: string, sent: Sent, asked: string[]): KeyedRequest | null =>
    sent.idempotencyKey === null ? null : { personId: actor.personId, endpoint, key: sent.idempotencyKey, asked };

  return {
    list(actor: Actor): BenchItem[] {
      requireRight(actor, 'readBenches');
      return repo.listNewestVersions(store.db).map((row) => ({
        benchId: row.benchId,
        name: row.name,
        newest: toVersion(row),
        profile: profileOf(row),
      }));
    },

    show,

    create(actor: Actor, profile: BenchProfile, sent: Sent): Bench {
      requireRight(actor, 'writeBenches');
      const benchId = store.write((tx) => {
        const request = keyed(actor, 'createBench', sent, [profileFileDigest(profile)]);
        const before = request && findResult(tx, request);
        if (before) return before;
        const id = deps.newId();
        const nowMs = clock.nowMs();
        repo.insertBench(tx, { id, createdBy: actor.personId, createdAtMs: nowMs, headVersionId: '' });
        addVersion(tx, actor, id, 1, profile, sent);
        if (request) rememberResult(tx, request, id, nowMs);
        return id;
      });
      return show(actor, benchId);
    },

    /** The next version after the one that the admin looked at; packs keep the version they were made for. */
    save(actor: Actor, benchId: string, afterVersion: number, profile: BenchProfile, sent: Sent): Bench {
      requireRight(actor, 'writeBenches');
      store.write((tx) => {
        const asked = [benchId, String(afterVersion), profileFileDigest(profile)];
        const request = keyed(actor, 'saveBench', sent, asked);
        if (request && findResult(tx, request)) return;
        const newest = authorizeRead(actor, 'readBenches', repo.findVersion(tx, benchId));
        if (newest.version !== afterVersion) {
          throw new DomainError('stale_revision', {
            detail: `${newest.savedByName} saved version ${newest.version} first.`,
            facts: { newest: toVersion(newest) },
          });
        }
        if (newest.fileDigest !== profileFileDigest(profile))
          addVersion(tx, actor, benchId, newest.version + 1, profile, sent);
        if (request) rememberResult(tx, request, benchId, clock.nowMs());
      });
      return show(actor, benchId);
    },
  };
}
