/** The library: one function a question. The same entry serves Node and browsers. */
export type { Fault } from "./errors.js";
export { LimitError, OptionsError, StoppedError, WalkError } from "./errors.js";
export { exactRational } from "./exact/number.js";
export { type GrowthOptions, type GrowthResult, growth } from "./growth/growth.js";
export { loadKernel } from "./kernel/kernel.js";
export { type OrbitsOptions, orbits } from "./orbits/orbits.js";
export type { OrbitKind, OrbitsResult } from "./orbits/result.js";
export type { Quantity, Standing, Verdict } from "./quantity/quantity.js";
export { quantityNumber } from "./quantity/quantity.js";
export { type CommonOptions, type Effort, type Progress, withSession } from "./session.js";
export type { PositionBlock } from "./trajectory/block.js";
export { parseChoices } from "./trajectory/choices.js";
export type { PositionShape, PositionSink, TrajectoryOptions } from "./trajectory/options.js";
export type { TrajectoryResult } from "./trajectory/result.js";
export { trajectory } from "./trajectory/trajectory.js";
export { VERSION } from "./version.js";
