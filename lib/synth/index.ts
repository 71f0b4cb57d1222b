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
export type {
  FitCheck,
  FitFinding,
  FitKnowledge,
  FitVerdict,
  MeasuredLevels,
  MeasuredWave,
  PlainChange,
  Remedy,
  RemedyKind,
  SeamMeasure,
  SymbolPeaks,
} from './fit/types';
export type { CardOverrides, CardReading, Caution, LevelCard } from './level/types';

// synthesis, words, markers
export { SynthError, type SynthErrorCode } from './errors';
export {
  sineCosine,
  sineCosineOfFraction,
  writeUnitOfFraction,
  writeUnitOfTurns,
  createRootsOfUnity,
} from './math/turns';
export { amplitudeOfDecibels, exponential, log10, logarithm, powerOfDecibels } from './math/exponential';
export { createSum, type CompensatedSum } from './math/sums';
export { bitsPerCell, isMapKnown, pointsOf } from './mapping/constellations';
export { compressGrid, expandGrid, lowestSubcarrier } from './grid/grid';
export { createBitSource, type BitSource } from './sequences/bitSource';
export { createSequence, sequenceValue, type ValueSequence } from './sequences/sequence';
export { createTransform, isFiveSmooth, type Transform } from './fft/transform';
export { frameLayout, interpolationOf } from './synthesize/layout';
export { createCellValues } from './synthesize/cellValues';
export { createSampleEngine } from './engine/sampleEngine';
export type { EngineExports, SampleEngine } from './engine/types';
export { createRamp } from './synthesize/ramp';
export { createSymbolSynthesis } from './synthesize/symbolSynthesis';
export { createSynthesis, meanPowerBefore } from './synthesize/synthesis';
export { createSentValues, type SentValues } from './synthesize/sentValues';
export { createReductionMeasure, type ReductionMeasuring, type ReductionReport } from './peak/reductionMeasure';
export { createPeakMeasure, type FiguresMeasuring, type PeakFigures } from './peak/peakMeasure';
export type { PeakSearch } from './peak/search';
export { createSeedSearch, seedsOf, streamsWithSeed, type SeedRange } from './peak/seedSearch';
export { createPhaseSearch, trayWithPhases, type PhaseChoice, type PhaseReach } from './peak/phases';
export { addLevelParts, collectLevelParts, type LevelParts } from './synthesize/levelParts';
export { stretchEnd } from './synthesize/stretches';
export { repeatCopies, type RepeatCopies } from './synthesize/repeatCopies';
export { createStatsCollector, interpolatedPeak, vectorStats } from './synthesize/vectorStats';
export type {
  CellValues,
  FrameLayout,
  RenderOptions,
  StatsCollector,
  SymbolSynthesis,
  Synthesis,
  VectorStats,
} from './synthesize/types';
export { fullScaleOf, wordScale } from './quantize/wordScale';
export type { ReferenceLevels, SaturationCount, WordScale } from './quantize/types';
export { createWordWriter, type WordWriter } from './files/wordWriter';
export { createWordReader, type WordReader } from './files/wordReader';
export { bytesPerSample, bytesPerWord, offsetOf, shiftBits } from './files/layout';
export { npyType } from './files/fileHeads';
export { freeMarkerBits, layoutRefusals, vectorRefusals, type LayoutRefusal } from './files/layoutRules';
export { sidednessPlan, type SidednessPlan } from './files/sidedness';
export { vectorBytes, vectorFiles, vectorFilesOf, type VectorFile } from './files/vectorFiles';
export { createVectorForm, createVectorGather, type VectorForm, type VectorGather } from './files/vectorForm';
export { markerBytes, markerRanges, type MarkerBytes, type MarkerRange } from './files/markers';
export { synthVersion } from './version';

// figures and measures
export {
  createCellCensus,
  deriveFigures,
  exactFraction,
  fractionToNumber,
  type CellCensus,
  type DerivedFigures,
  type ExactFraction,
} from './numerology';
export { pilotReach, type PilotReach, type ReachPair } from './measure/pilotReach';
export {
  createFrameTally,
  createSymbolTally,
  outstandingSymbols,
  tallySymbol,
  tallyTail,
  type FrameTally,
  type TallyOverlap,
} from './measure/tally';
export {
  ccdfThresholds,
  dbAtProbability,
  gaussianCcdf,
  gaussianSymbolCcdf,
  sampleCcdf,
  symbolCcdf,
} from './measure/ccdf';
export {
  createFrameMeasure,
  createFrameStretches,
  createFrameSum,
  type FrameMeasure,
  type FrameMeasuring,
  type FrameStretch,
  type FrameStretches,
} from './measure/frameMeasure';
export { createSeamCollector } from './measure/seam';
export { symbolPeaksOf } from './measure/symbolPeaks';
export { createWindow } from './measure/window';
export {
  createWelch,
  densityBetween,
  frequencyOfBin,
  occupiedBandwidth,
  spectralNotch,
  welchSegment,
  welchSpectrum,
  type SpectralNotch,
  type WelchEstimate,
  type WelchOptions,
} from './measure/spectrum';
export {
  createCellPower,
  worstUnpaintedLine,
  type CellNotch,
  type CellPower,
  type CellPowerSums,
  type UnpaintedLine,
} from './measure/cells';
export { decimateEnvelope, decimateMinMax } from './measure/decimate';
export {
  createReconstructedPeak,
  reconstructedPeak,
  type PeakMeasuring,
  type SampleSource,
} from './measure/reconstructedPeak';
export {
  createEvmMeter,
  createTapEstimate,
  type EvmMeter,
  type EvmOptions,
  type EvmSums,
  type TapEstimate,
} from './measure/evm';
export { createDemodulator, type Demodulator, type FoundSymbol } from './receive/demodulate';

// reception of captures
export { createReception, type CaptureOptions, type CaptureStage, type Reception } from './receive/receiveCapture';
export { causeWords, clockBeyondWords, measuredSymbolsWords, notFollowedWords, recipeWords } from './receive/words';
export { fileNullPower } from './receive/fileNulls';
export { createLookAlikes, type Likeness, type LookAlikes } from './receive/lookAlike';
export type {
  BoundedDb,
  CaptureResult,
  ChannelReport,
  ChannelSource,
  ConstellationPoints,
  ImbalanceReport,
  MeasuredCapture,
  NullPower,
  RefusedCapture,
  UnrecognisedCapture,
} from './receive/types';
export {
  layoutOfBench,
  layoutWords,
  plainLayout,
  type ByteSource,
  type CaptureLayout,
  type LayoutOutcome,
} from './receive/files/captureLayout';
export { readSigmfMeta } from './receive/files/containers';
export { guessLayout } from './receive/files/guessLayout';
export { captureReadings, type CaptureReading, type ReadingsOutcome } from './receive/files/captureSource';
export {
  createImpairedCapture,
  noImpairments,
  type ChannelTap,
  type Impairments,
  type ImpairedCapture,
  type ImpairedVector,
} from './receive/impair';

// fit and level card
export { checkFit } from './fit/checkFit';
export { judge as judgeFit } from './fit/findings';
export { levelsAfter, waveAfter } from './fit/levelsAfter';
export { applyChanges } from './fit/changes';
export {
  loopClosing,
  payloadClosing,
  toneJumps,
  type LoopClosing,
  type PayloadClosing,
  type ToneJump,
  type ToneJumps,
} from './fit/closing';
export { levelCard } from './level/levelCard';
export { countedPeakDbfs, levelsInDbfs } from './level/levels';
export { cautions, type CardContext } from './level/cautions';
