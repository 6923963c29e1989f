export { type NoticeCode, noticeCatalogue, type ProblemCode, problemCatalogue } from "./catalogue.ts";
export {
  at,
  type Fault,
  forEachItem,
  invariant,
  mostFaults,
  type Notice,
  type Place,
  Problem,
} from "./problem.ts";
