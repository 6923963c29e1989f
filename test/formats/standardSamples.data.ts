/**
 * What each file of the open data is, and for the broken ones what is wrong with it: the words that the refusal must hold.
 * Paths are those inside ccsds-ndm-samples and sgp4-verification (see their PROVENANCE.md).
 */

/** Broken, or of another kind. The clause of CCSDS 502.0-B-3 stands beside it where it is not plain. */
export const refused: readonly (readonly [file: string, why: string, ...words: string[]])[] = [
  // bradsease/samples: OEM
  ["bradsease/samples/v1_0/invalid/sample01.oem", "REF_FRAME_EPOCH came with 2.0", "line 14", "REF_FRAME_EPOCH"],
  ["bradsease/samples/v1_0/invalid/sample02.oem", "accelerations came with 2.0", "line 26", "accelerations"],
  ["bradsease/samples/v1_0/invalid/sample03.oem", "covariances came with 2.0", "line 24", "covariance"],
  ["bradsease/samples/v1_0/invalid/sample04.oem", "the same in XML", "line 61", "covariance"],
  ["bradsease/samples/v1_0/invalid/sample05.oem", "accelerations, in XML", "line 33", "X_DDOT"],
  ["bradsease/samples/v2_0/invalid/sample01.oem", "a comment before the version (7.8.9)", "line 1", "CCSDS_OEM_VERS"],
  ["bradsease/samples/v2_0/invalid/sample05.oem", "a covariance but no states", "line 20", "ephemeris lines"],
  ["bradsease/samples/v2_0/invalid/sample06.oem", "degree 7.1", "line 17", "INTERPOLATION_DEGREE", "whole number"],
  ["bradsease/samples/v2_0/invalid/sample07.oem", "useable stop before useable start", "line 14", "USEABLE_STOP_TIME"],
  ["bradsease/samples/v2_0/invalid/sample08.oem", "useable start before start", "line 13", "USEABLE_START_TIME"],
  [
    "bradsease/samples/v2_0/invalid/sample09.oem",
    "one end of the useable span only",
    "line 13",
    "both USEABLE_START_TIME",
  ],
  [
    "bradsease/samples/v2_0/invalid/sample10.oem",
    "interpolation without degree (table 5-3)",
    "line 16",
    "INTERPOLATION_DEGREE",
  ],
  ["bradsease/samples/v2_0/invalid/sample11.oem", "START_TIME is missing", "START_TIME", "must be given"],
  ["bradsease/samples/v2_0/invalid/sample12.oem", "an unknown keyword", "line 18", "INVALID_KEY"],
  [
    "bradsease/samples/v2_0/invalid/sample13.oem",
    "accelerations in the first state only",
    "line 21",
    "as many numbers",
  ],
  ["bradsease/samples/v2_0/invalid/sample14.oem", "useable spans overlap (5.2.4.4)", "segment 2", "useable stop"],
  ["bradsease/samples/v2_0/invalid/sample15.oem", "MESSAGE_ID came with 3.0", "line 19", "MESSAGE_ID"],
  ["bradsease/samples/v2_0/invalid/sample16.oem", "five numbers in a state", "line 21", "there are 6 items"],
  ["bradsease/samples/v2_0/invalid/sample17.oem", "letters for a number", "line 22", "abcdefgh"],
  ["bradsease/samples/v2_0/invalid/sample18.oem", "an unknown keyword in a covariance", "line 27", "NOTALLOWED"],
  ["bradsease/samples/v2_0/invalid/sample19.oem", "a word in a covariance", "line 27", "BADHEADER"],
  ["bradsease/samples/v2_0/invalid/sample20.oem", "four numbers in row 5", "line 31", "row 5"],
  ["bradsease/samples/v2_0/invalid/sample21.oem", "ORIGINATOR twice", "line 5", "ORIGINATOR", "once"],
  ["bradsease/samples/v2_0/invalid/sample22.oem", "no equals sign in the header", "line 4", "no equals sign"],
  ["bradsease/samples/v2_0/invalid/sample23.oem", "OBJECT_NAME twice", "line 8", "OBJECT_NAME", "once"],
  ["bradsease/samples/v2_0/invalid/sample24.oem", "no equals sign in the metadata", "line 7", "no equals sign"],
  ["bradsease/samples/v2_0/invalid/sample25.oem", "a value without a keyword", "line 27", "= 1234"],
  // bradsease/omm: OMM
  ["bradsease/omm/samples/v2_0/invalid/both-size-fields.omm", "both sizes of orbit", "SEMI_MAJOR_AXIS and MEAN_MOTION"],
  [
    "bradsease/omm/samples/v2_0/invalid/metadata-after-data.omm",
    "metadata after data",
    "line 7, OBJECT_NAME",
    "before",
  ],
  ["bradsease/omm/samples/v2_0/invalid/missing-sgp-derivative.omm", "SGP without derivatives", "MEAN_MOTION_DOT"],
  ["bradsease/omm/samples/v2_0/invalid/partial-covariance.omm", "one element of 21", "line 20", "all 21 elements"],
  ["bradsease/omm/samples/v2_0/invalid/sgp4-xp.omm", "SGP4-XP came with 3.0", "line 11", "SGP4-XP"],
  ["bradsease/omm/samples/v2_0/invalid/unsupported-version.omm", "there was no OMM 1.0", "line 1", '"1.0"'],
  [
    "bradsease/omm/samples/v2_0/invalid/v3-header-field.omm",
    "CLASSIFICATION came with 3.0",
    "line 3",
    "CLASSIFICATION",
  ],
  ["bradsease/omm/samples/v3_0/invalid/conflicting-drag-parameters.omm", "two drag terms", "BSTAR and BTERM"],
  ["bradsease/omm/samples/v3_0/invalid/invalid-classification-type.omm", "two letters", "CLASSIFICATION_TYPE", '"UN"'],
  ["bradsease/omm/samples/v3_0/invalid/invalid-root.xml", "an OPM, and empty", "<opm>", "<body>"],
  ["bradsease/omm/samples/v3_0/invalid/missing-bterm.omm", "SGP4-XP without BTERM", "line 13", "BTERM"],
  [
    "bradsease/omm/samples/v3_0/invalid/missing-norad-catalog-id.omm",
    "SGP4 without a number",
    "line 13",
    "NORAD_CAT_ID",
  ],
  ["bradsease/omm/samples/v3_0/invalid/partial-covariance.omm", "one element of 21", "line 22", "all 21 elements"],
  // figures of the standard that are other messages, or several
  ...[
    "ocm_g15_minimal.kvn",
    "ocm_g16_characteristics.kvn",
    "ocm_g17_deployments.kvn",
    "ocm_g18_multi_traj.kvn",
    "ocm_g19_covariance_histories.kvn",
    "ocm_g20.xml",
  ].map(
    (name) =>
      [`odm-standard-figures/${name}`, "another kind", "orbit comprehensive message (OCM)", "not read here"] as const,
  ),
  ["odm-standard-figures/ndm_g21_combined_omm.xml", "three OMMs in one", "omm, omm, omm", "this holds 3"],
  ["odm-standard-figures/ndm_g22_combined_all.xml", "four kinds in one", "opm, omm, oem, ocm", "this holds 4"],
];

/** Read, but with remarks that must hold these words. Whatever is read and not listed here has no remark. */
export const remarked: readonly (readonly [file: string, why: string, ...words: string[]])[] = [
  ["bradsease/samples/v2_0/invalid/sample02.skip", "a comment between metadata (7.8.9)", "line 8", "comment"],
  ["bradsease/samples/v2_0/invalid/sample03.skip", "a comment between states (7.8.9)", "line 21", "comment"],
  ["bradsease/samples/v3_0/valid/sample01.oem", "MESSAGE_ID in the metadata (table 5-2)", "line 19", "MESSAGE_ID"],
  [
    "odm-standard-figures/omm_celestrak_iss_25544.kvn",
    "empty header fields",
    "CREATION_DATE is empty",
    "ORIGINATOR is empty",
  ],
  ["sgp4-verification/sample_omm.xml", "empty header fields", "CREATION_DATE is empty", "ORIGINATOR is empty"],
  ["sgp4-verification/sample_omm.json", "what catalogues leave out", "REF_FRAME TEME", "SGP4"],
];

/** Folder of real messages, all with empty header fields. */
export const realOmms = "bradsease/omm/samples/real/";

/** No messages: packed files (their contents are not text), a table, and numbers printed by a program. */
export const noMessage = /\.(gz|bz2|xz|lzma|csv|out)$/;

/** Of the test satellites, the three that were altered to provoke errors and kept their old checksums. */
export const staleChecksums = ["33333", "33334", "33335"];
