import type { EngineExports, EngineRoom, SampleEngine } from './types';

/** What createSampleEngine takes: a module built from other sources would answer other samples without a word. */
export const kernelVersion = 1;

const ROOMS = 3;
const PAGE = 65536;

interface Room extends EngineRoom {
  tenant: object;
  usedAt: number;
  tenancy: number;
  isResting: boolean;
}

/** Which room another tenant may best have: a resting one (the last used is still in the cache), else the longest unused. */
function worthOf(room: Room): number {
  return room.isResting ? room.usedAt : -room.usedAt;
}

/**
 * An engine over instances that `instantiate` makes, each with a memory of its own; at most three. lib/synth knows no
 * WebAssembly: who loads the module hands its exports over. Throws where the module belongs to another version.
 */
export function createSampleEngine(instantiate: () => EngineExports): SampleEngine {
  const rooms: Room[] = [];
  let clock = 0;
  let first: EngineExports | null = instantiate();
  const built = first.builtVersion?.() ?? 0;
  if (built !== kernelVersion)
    throw new Error(`The sample engine was built for version ${built}, not ${kernelVersion}. Build it anew.`);

  function openRoom(): Room {
    const best = rooms.reduce<Room | null>((a, b) => (a !== null && worthOf(a) >= worthOf(b) ? a : b), null);
    if (best !== null && (best.isResting || rooms.length >= ROOMS)) return best;
    const exports = first ?? instantiate();
    first = null;
    const room = {
      exports,
      start: exports.freeFrom(),
      tenant: {},
      usedAt: 0,
      tenancy: 0,
      planSize: 0,
      isResting: false,
    };
    rooms.push(room);
    return room;
  }

  return {
    rent(tenant, bytes) {
      clock++;
      let room = rooms.find((candidate) => candidate.tenant === tenant);
      if (room === undefined) {
        room = openRoom();
        room.tenant = tenant;
        room.tenancy = clock;
        const { memory } = room.exports;
        const missing = room.start + bytes - memory.buffer.byteLength;
        if (missing > 0) memory.grow(Math.ceil(missing / PAGE));
      }
      room.usedAt = clock;
      room.isResting = false;
      return room;
    },
    rest(tenant) {
      for (const room of rooms) if (room.tenant === tenant) room.isResting = true;
    },
  };
}
