/** Shown in README, in the interface document and in every report. */
export const caution =
  "Tauline is decision support. It is not qualified for flight safety. Before its output is used for manoeuvre timing, " +
  "conjunction screening, range safety, commanding or navigation services, check it by an independent means and follow " +
  "the mission's own flight rules, the responsible authority's procedures and the applicable standards; licensed or " +
  "certified practice has the last word.";
