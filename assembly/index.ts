// Every export of the kernel, grouped by the question that it serves.

// The border itself
export { alloc, mark, release, setCeiling } from "./memory";
export { statusCheckFailed, statusFull, statusNotConverged, statusOverflow } from "./status";
export { realAtan2, realCos, realExp, realLog, realLog1p, realPow, realSin } from "./real";

// Randomness
export { drawMoves, drawStart } from "./random/choices";
export { philoxBlock } from "./random/philox";

// Big integers
export { limbsFromHex } from "./fixed/hex";
export { multiply, productPlan } from "./fixed/multiply";
export { lengthFor, makePlan, planBytes, planFamily } from "./fixed/plan";
export { errorFactor } from "./fixed/transform";

// Where is the walk? The window: short walks, ensembles, leaves of the tree
export {
  windowBatches,
  windowBytes,
  windowConsumes,
  windowLimbs,
  windowLongest,
  windowOpen,
  windowPlan,
  windowRecordBytes,
  windowReplay,
  windowWorkBytes,
} from "./trajectory/batches";
export { windowAdvance, windowCarry, windowEmit, windowStart } from "./trajectory/window";
export { windowProduct } from "./trajectory/rough";
export { scatterStart } from "./trajectory/start";
// the tree: long walks
export {
  treeAdd,
  treeBits,
  treeCheck,
  treeColumn,
  treeInterleave,
  treePack,
  treeRow,
  treeTransform,
} from "./trajectory/tree";
// residues: rational starts
export { modulusBytes, modulusOpen, residueWalk } from "./trajectory/residue";

// How fast do products grow?
export { advanceFrames, advanceVectors, frameLogs, vectorLogs } from "./growth/norms";
export { wordMeans, wordNorms } from "./growth/words";

// The law, correlations: the dual walk
export { dualAdd, dualEvolve, dualMoveBytes } from "./dual/evolve";
export { dualPhase } from "./dual/phase";
export { dualEvaluate, dualFind, dualGather, dualLargestCoefficient, dualPair, dualPairExact } from "./dual/sums";
export {
  dualClear,
  dualCount,
  dualFoldConjugate,
  dualFoldEven,
  dualFoldNone,
  dualHeaderBytes,
  dualLargest,
  dualSetPacked,
  dualSetPart,
  dualSlots,
} from "./dual/table";

// Averages along a path
export { observeAdd, observeBox, observePhases, observeSum } from "./averages/observe";

// Finite orbits
export {
  orbitAdd,
  orbitApply,
  orbitCentre,
  orbitLanczos,
  orbitProject,
  orbitRotate,
  orbitScale,
  orbitSpread,
} from "./finite/krylov";
export { orbitLabel, orbitLocal, orbitMatch, orbitTables } from "./finite/tables";
