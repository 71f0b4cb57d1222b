// Bundled by goldenDigests.spec.ts and run as a worker of the page: the page's own engine renders the fixtures.
import { sha256 } from '@noble/hashes/sha2.js';
import { bytesToHex } from '@noble/hashes/utils.js';
import { synthVersion, type BenchContent, type WaveformContent } from '@/lib/synth';
import { goldenBytes, type GoldenKind } from '../../helpers/goldenOutputs.ts';

const worker = globalThis as unknown as {
  onmessage: (event: { data: { content: WaveformContent; bench: BenchContent; kinds: GoldenKind[] } }) => void;
  postMessage(answer: { synthVersion: number; digests: Record<string, string> }): void;
};

worker.onmessage = ({ data: { content, bench, kinds } }) => {
  const digests = Object.fromEntries(
    kinds.map((kind) => [kind, bytesToHex(sha256(goldenBytes(content, bench, kind)))]),
  );
  worker.postMessage({ synthVersion, digests });
};
