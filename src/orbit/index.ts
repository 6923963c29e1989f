export {
  buildTrajectory,
  type GeodeticPoint,
  type HeightOf,
  type StateError,
  type TrajectoryDescription,
} from "./build.ts";
export { type OsculatingElements, osculatingElements } from "./elements.ts";
export { type Frame, frames, type Kinematics } from "./frames.ts";
export type { OrbitError, StateArray, Trajectory } from "./trajectory.ts";
export { eccentricAnomaly, type KeplerianElements, twoBodyState } from "./twoBody.ts";
