/** The public face of the signal library: the only file of lib/synth that others import. */
export * from './types';

// measures, fit, level card
export type {
  CcdfCurve,
  EvmFigure,
  EvmRecipe,
  EvmReport,
  FramePower,
  OccupiedBand,
  PowerHistogram,
  ReconstructedPeak,
  Spectrum,
  SymbolTally,
  WindowKind,
  WindowTable,
} from './measure/types';
export type { FitCheck, FitFinding, FitVerdict, MeasuredLevels, PlainChange, Remedy } from './fit/types';
export type { CardOverrides, CardReading, Caution, LevelCard } from './level/types';
