// Every export of the kernel, grouped by the question that it serves.

// Averages
export { observeAdd, observeBox, observePhases, observeSum } from "./averages/observe";
// The dual walk: law, averages
export { dualAdd, dualEvolve, dualMoveBytes } from "./dual/evolve";
export { dualPhase } from "./dual/phase";
export { dualEvaluate, dualFind, dualGather, dualLargestCoefficient, dualPair } from "./dual/sums";
export {
  dualClear,
  dualCount,
  dualFoldConjugate,
  dualFoldEven,
  dualFoldNone,
  dualHeaderBytes,
  dualLargest,
} from "./dual/table";
// Orbits
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
// Trajectory: big integers
export { multiply, productPlan } from "./fixed/multiply";
export { lengthFor, makePlan, planBytes } from "./fixed/plan";
export { errorFactor } from "./fixed/transform";
// Growth
export { advanceFrames, advanceVectors, frameLogs, vectorLogs } from "./growth/norms";
// The border itself
export { alloc, mark, release, setCeiling } from "./memory";
export { drawMoves, drawStart } from "./random/choices";
// Randomness
export { philoxBlock } from "./random/philox";
export { realAtan2, realCos, realExp, realLog, realLog1p, realPow, realSin } from "./real";
export { statusCheckFailed, statusFull, statusNotConverged, statusOverflow } from "./status";
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
// Trajectories
export { residueWalk, residueWalk2 } from "./trajectory/residue";
export { windowProduct } from "./trajectory/rough";
export { scatterStart } from "./trajectory/start";
export { treeAdd, treeBits, treeColumn, treeInterleave, treePack, treeRow, treeTransform } from "./trajectory/tree";
export { windowAdvance, windowCarry, windowEmit, windowStart } from "./trajectory/window";
