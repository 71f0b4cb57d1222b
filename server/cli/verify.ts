import { access } from 'node:fs/promises';
import { verifyPack, type VerifyOptions } from '../packs/verifyPack.ts';
import { done, refused, type Outcome } from './outcome.ts';
import { reasonOf } from './readInputs.ts';

/** verify pack.zip: whether the pack is what its document and profile give, word for word. */
export async function verify(command: { pack: string }, options: VerifyOptions): Promise<Outcome> {
  try {
    await access(command.pack);
  } catch (error) {
    return refused('io_failed', `${command.pack}: ${reasonOf(error)}.`);
  }
  const result = await verifyPack(command.pack, options);
  if (!result.ok) return refused(result.code, `${command.pack}: ${result.message}`, result.issues);
  const { manifest, entries, wordsCompared, evmDb, madeAgain } = result.verified;
  const state = manifest.edition === null ? 'a draft' : `edition ${manifest.edition}`;
  return done(
    [
      `${command.pack}: the same, ${state}`,
      `  ${entries} entries, every digest as the manifest says`,
      `  ${wordsCompared} words equal to a new synthesis, EVM ${evmDb === null ? 'none' : `${evmDb.toFixed(2)} dB`}`,
      madeAgain
        ? '  every other entry made again, byte for byte'
        : `  made by synthesis ${manifest.digests.synthVersion}, pack ${manifest.digests.packVersion}: the other entries were not made again`,
    ],
    {
      state: manifest.state,
      edition: manifest.edition,
      packKey: manifest.packKey,
      entries,
      wordsCompared,
      evmDb,
      madeAgain,
    },
  );
}
