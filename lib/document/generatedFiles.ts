import { z } from './zod';
import { benchProfileSchema } from './benchSchema';
import { exampleBenches } from './examples/exampleBenches';
import { exampleDocuments } from './examples/exampleDocuments';
import { manifestSchema } from './manifestSchema';
import { waveformDocumentSchema } from './waveformSchema';

export interface GeneratedFile {
  /** From the repository's root. */
  path: string;
  text: string;
}

const schemas: readonly [name: string, schema: z.ZodType][] = [
  ['waveform', waveformDocumentSchema],
  ['bench', benchProfileSchema],
  ['manifest', manifestSchema],
];

/**
 * The files of the repository that are made from code: the JSON Schemas (shape and ranges; the rules across fields are beyond
 * them) and the example files. A test holds the files on disk to this.
 */
export function generatedFiles(): GeneratedFile[] {
  return [
    ...schemas.map(([name, schema]) => ({
      path: `lib/document/schemas/${name}.schema.json`,
      text: `${JSON.stringify(z.toJSONSchema(schema), null, 2)}\n`,
    })),
    ...exampleDocuments.map(({ exampleId, build }) => ({
      path: `lib/document/examples/${exampleId}.combwright.json`,
      text: `${JSON.stringify(build())}\n`,
    })),
    ...exampleBenches.map(({ exampleId, build }) => ({
      path: `lib/document/examples/${exampleId}.bench.json`,
      text: `${JSON.stringify(build(), null, 2)}\n`,
    })),
  ];
}
