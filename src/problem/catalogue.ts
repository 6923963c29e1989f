/**
 * Every way in which a request can fail, with its HTTP status, its title and what to do about it. The interface
 * document and README's table of problems are made from this list; a test proves that each code is thrown somewhere.
 *
 * 400: cannot be read as documented. 422: reads well but makes no sense, or is not available.
 */
export const problemCatalogue = {
  "invalid-json": {
    status: 400,
    title: "The body is not readable JSON",
    remedy: "Send one JSON object in UTF-8, nested at most 32 deep.",
  },
  "invalid-request": {
    status: 400,
    title: "The request does not have the documented shape",
    remedy: "Each fault points to a field and says what is expected there; compare with /openapi.json.",
  },
  "invalid-instant": {
    status: 400,
    title: "An instant cannot be read",
    remedy:
      'Write UTC as "2026-03-01T00:00:00.5Z", any other scale as { "at": "2026-03-01T00:00:37", "scale": "TAI" }.',
  },
  "invalid-time-code": {
    status: 400,
    title: "A time code cannot be read or written in the format given",
    remedy:
      "The detail says which part is wrong and what would be right; a format names its octets, epoch and P-field (CCSDS 301.0-B-4).",
  },
  "invalid-message": {
    status: 400,
    title: "An orbit message cannot be read",
    remedy: "The detail names the line and the keyword, what was found there and what would be right.",
  },
  "unknown-path": {
    status: 404,
    title: "There is nothing at this address",
    remedy: "The calls are listed in /openapi.json.",
  },
  "method-not-allowed": {
    status: 405,
    title: "This address does not take this method",
    remedy: "The Allow header names the methods that it takes.",
  },
  "body-too-large": {
    status: 413,
    title: "The body is larger than the service takes",
    remedy: "Split the request: a body may have 16 MiB.",
  },
  "unsupported-media-type": {
    status: 415,
    title: "The body is of a type that the service does not read",
    remedy: "Send Content-Type: application/json, in UTF-8, without any Content-Encoding but gzip, deflate or br.",
  },
  "instant-out-of-range": {
    status: 422,
    title: "An instant lies outside the years that the service covers",
    remedy: "UTC began in its present form on 1972-01-01; instants are covered from then to the end of 2100.",
  },
  "impossible-clock": {
    status: 422,
    title: "The clock as described cannot exist",
    remedy: "Correct the field that the fault points to.",
  },
  "reading-beyond-width": {
    status: 422,
    title: "A counter value does not fit the counter",
    remedy: "A counter of n bits shows 0 to 2^n - 1; without a width it may show any integer.",
  },
  "ambiguous-rollover": {
    status: 422,
    title: "A counter value could mean more than one time",
    remedy: 'Give "near" (a rough time of the reading) or "unwrap": "after", "before" or "nearest".',
  },
  "ambiguous-reading": {
    status: 422,
    title: "A clock that was put back showed a reading more than once",
    remedy: 'Give "near" (a rough time of the reading) or "unwrap": "after", "before" or "nearest".',
  },
  "reading-not-shown": {
    status: 422,
    title: "A clock event passed over a reading, so the clock never showed it",
    remedy: "Check the reading and the event that the detail names: its instant, its size and its sign.",
  },
  "anchor-needed": {
    status: 422,
    title: "A clock event ends the model, and what was asked lies beyond it",
    remedy: "Give a clock with an anchor on that side of the event; the detail names the event and its instant.",
  },
  "impossible-state": {
    status: 422,
    title: "A position and velocity cannot belong to a clock that this service computes",
    remedy: "Check units (km, km/s), frame and centre of the state that the fault points to.",
  },
  "impossible-table": {
    status: 422,
    title: "A table of states or points cannot be used",
    remedy: "Give distinct instants in rising order, and enough of them for interpolation.",
  },
  "unusable-message": {
    status: 422,
    title: "An orbit message is well formed but cannot be used here",
    remedy: "The detail says what in it is not computed: another body, frame or theory, or manoeuvres.",
  },
  "outside-span": {
    status: 422,
    title: "An instant lies outside the span of the trajectory",
    remedy: "The detail names the span; nothing is extrapolated beyond it.",
  },
  "horizon-too-long": {
    status: 422,
    title: "A horizon is longer than the service computes",
    remedy: "A budget covers at most 20 years, and no more than the trajectory's span.",
  },
  "internal-error": {
    status: 500,
    title: "The service failed",
    remedy: "This is a fault of the service, not of the request; report it with the request id.",
  },
  unavailable: {
    status: 503,
    title: "The service is stopping or not ready",
    remedy: "Try again after the time in Retry-After.",
  },
} as const satisfies Record<string, { status: number; title: string; remedy: string }>;

export type ProblemCode = keyof typeof problemCatalogue;

/** Remarks that travel with a good answer. They never change a number; they say how far to trust it. */
export const noticeCatalogue = {
  "terms-left-out": "Physical terms that the request left out; they are neither computed nor summed.",
  "anchor-uncertainty-not-given": "No uncertainty was given for the anchor; none is invented, so none is included.",
  "oscillator-uncertainty-not-given":
    "No uncertainty was given for the oscillator; its drift is not in the uncertainty.",
  "orbit-uncertainty-not-given": "No uncertainty was given for the orbit; none is invented, so none is included.",
  "isotropic-orbit-uncertainty": "One sigma for every direction: the orbit's contribution is an upper bound.",
  "implausible-orbit": "The orbit is hardly what was meant; the text says what probably was.",
  "mean-element-uncertainty": "Mean elements bring no uncertainty; the usual size is assumed and said.",
  "segments-apart": "An ephemeris has gaps between its segments; only the run that holds the anchor is used.",
  "message-remark": "A remark on an orbit message that was read all the same.",
  "coarse-ephemeris": "The table is too coarse for its orbit; the estimated interpolation error is in the uncertainty.",
  "velocities-derived": "The table has no velocities; they were derived from its positions.",
  "earth-orientation-not-given":
    "UT1 - UTC and the pole were taken as zero; the uncertainty carries what that may cost.",
  "leap-table-expired": "A corrected instant lies after the expiry of the leap-second table.",
  "weak-field-limit": "The speed is beyond 1e-3 of light near masses; the sum of the terms is then approximate.",
  "model-limited": "All digits are exact by the model that the text names; the model itself is not known as well.",
  "realised-scale": "The scale is related to TAI by its integer rule; its realisation differs by nanoseconds.",
} as const;

export type NoticeCode = keyof typeof noticeCatalogue;
