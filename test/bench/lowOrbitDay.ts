import { twoBodyState } from "../../src/orbit/index.ts";
import { PropagatedTrajectory } from "../../src/orbit/propagated.ts";
import { ProperTime, rateTerms } from "../../src/relativity/index.ts";
import { DAY } from "../../src/units/index.ts";
import { axes, epoch, orbitClasses } from "../support/orbits.ts";
import { between, figure, plain, type Row, sink, timesOf } from "./measure.ts";

const given = { orbitError: null, notices: [], implausible: false };

/** PRE: all terms of one day of a low orbit, from nothing but a warm machine. */
export function lowOrbitDay(): Row[] {
  const { position, velocity } = twoBodyState(orbitClasses["low 400 km, 51.6 deg"], 0);
  const fresh = () => new PropagatedTrajectory(epoch, position, velocity, axes, given);
  const extended = fresh();
  extended.extend(0, DAY + 3600);
  const table = (path: PropagatedTrajectory): void => {
    sink.value += new ProperTime(path, rateTerms, 0).between(0, DAY)[0]!;
  };
  const integral = figure(timesOf(() => table(extended), 100, 61));
  const both = figure(timesOf(() => table(fresh()), 30, 61));
  return [
    {
      id: "PRE",
      definition: "integral of all terms, one LEO day, warm; path at hand",
      reached: `${plain(integral.median, 3)} ms`,
      target: "2 ms",
      met: integral.median <= 2,
      spread: between(integral, 3),
    },
    {
      id: "PRE",
      definition: "the same with propagation from one state",
      reached: `${plain(both.median, 3)} ms`,
      target: "",
      met: null,
      spread: between(both, 3),
    },
  ];
}
