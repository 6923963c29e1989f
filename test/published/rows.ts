import { ashby } from "./ashby.ts";
import { coordinateTimes } from "./coordinateTimes.ts";
import { eccentricGalileo } from "./eccentricGalileo.ts";
import { galileoAndGlonass } from "./galileoAndGlonass.ts";
import { gnssFigureRows } from "./gnssFigures.ts";
import { gpsInterfaceSpecification } from "./gpsInterfaceSpecification.ts";
import { gravityProbe } from "./gravityProbe.ts";
import { hafeleKeating } from "./hafeleKeating.ts";
import { iauConstants } from "./iauConstants.ts";
import { iauRoutines } from "./iauRoutines.ts";
import { laboratoryExperiments } from "./laboratoryExperiments.ts";
import { meanElements } from "./meanElements.ts";
import { moonSurface } from "./moonSurface.ts";
import { publicDerivations } from "./publicDerivations.ts";
import type { Row } from "./row.ts";
import { specialRelativity } from "./specialRelativity.ts";
import { timeCodes } from "./timeCodes.ts";
import { timeScales } from "./timeScales.ts";

/** Every row that needs no file: a new source family is a file of its own and a line here. */
export const publishedRows: readonly Row[] = [
  ...iauConstants,
  ...ashby,
  ...gpsInterfaceSpecification,
  ...galileoAndGlonass,
  ...eccentricGalileo,
  ...publicDerivations,
  ...hafeleKeating,
  ...gravityProbe,
  ...laboratoryExperiments,
  ...moonSurface,
  ...timeScales,
  ...coordinateTimes,
  ...timeCodes,
  ...specialRelativity,
  ...iauRoutines,
  ...gnssFigureRows,
  ...meanElements,
];
