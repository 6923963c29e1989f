export { buildTrajectory } from "./build.ts";
export type {
  Center,
  GeodeticPoint,
  HeightOf,
  SegmentDescription,
  StateError,
  TrajectoryDescription,
} from "./description.ts";
export { type OsculatingElements, osculatingElements } from "./elements.ts";
export { type Frame, frames, isFreeOfEarth, type Kinematics } from "./frames.ts";
export { innermost } from "./propagated.ts";
export type { TableMethod } from "./table.ts";
export type { OrbitError, StateArray, Trajectory } from "./trajectory.ts";
export { eccentricAnomaly, type KeplerianElements, twoBodyState } from "./twoBody.ts";
