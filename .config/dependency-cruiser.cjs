// The import rules of src: a folder uses lower ranks and itself, and others only through their index.ts (types excepted).
const ranks = [
  ["problem", "units"],
  ["numeric"],
  ["time"],
  ["formats", "bodies", "clock"],
  ["orbit"],
  ["relativity"],
  ["correction"],
  ["wire", "logs"],
  ["store"],
  ["jobs"],
  ["http", "cli", "web"],
];

const forbidden = [
  {
    name: "no-cycles",
    severity: "error",
    from: {},
    to: { circular: true, viaOnly: { dependencyTypesNot: ["type-only"] } },
  },
  {
    name: "no-orphans",
    severity: "error",
    from: { orphan: true, path: "^src", pathNot: "^src/(main|demo)\\.ts$" },
    to: {},
  },
  {
    name: "through-the-index",
    comment: "Values of another folder come through its index.ts.",
    severity: "error",
    from: { path: "^src/([^/]+)/" },
    to: {
      path: "^src/[^/]+/",
      pathNot: ["^src/$1/", "^src/[^/]+/index\\.ts$"],
      dependencyTypesNot: ["type-only"],
    },
  },
  {
    name: "through-the-index-from-the-top",
    severity: "error",
    from: { path: "^src/[^/]+\\.ts$" },
    to: { path: "^src/[^/]+/", pathNot: "^src/[^/]+/index\\.ts$", dependencyTypesNot: ["type-only"] },
  },
  {
    name: "nothing-uses-the-wiring",
    comment: "config, app, main and demo stand above every folder.",
    severity: "error",
    from: { path: "^src/[^/]+/" },
    to: { path: "^src/[^/]+\\.ts$" },
  },
  { name: "src-without-tests", severity: "error", from: { path: "^src" }, to: { path: "^test" } },
];

for (const [rank, folders] of ranks.entries()) {
  const higher = ranks.slice(rank + 1).flat();
  for (const folder of folders) {
    const beside = folders.filter((other) => other !== folder);
    const banned = [...higher, ...beside];
    if (banned.length === 0) continue;
    forbidden.push({
      name: `rank-of-${folder}`,
      severity: "error",
      from: { path: `^src/${folder}/` },
      to: { path: `^src/(${banned.join("|")})/` },
    });
  }
}

const homes = {
  luxon: "^src/time/display\\.ts$",
  "astronomy-engine": "^src/bodies/sunMoon\\.ts$",
  canonicalize: "^src/correction/evidence\\.ts$",
  commander: "^src/cli/[^/]+\\.ts$",
  "satellite\\.js": "^src/orbit/[^/]+\\.ts$",
};
for (const [library, home] of Object.entries(homes)) {
  forbidden.push({
    name: `one-home-for-${library}`,
    severity: "error",
    from: { path: "^src", pathNot: home },
    to: { path: `node_modules/(@types/)?${library}/` },
  });
}

module.exports = {
  forbidden,
  options: {
    doNotFollow: { path: "node_modules" },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: "tsconfig.json" },
    enhancedResolveOptions: { exportsFields: ["exports"], conditionNames: ["import", "types", "node", "default"] },
  },
};
