/**
 * The architecture rule: routes -> features -> statistics, ui, platform, db. `npm run architecture` checks it.
 *
 * @type {import("dependency-cruiser").IConfiguration}
 */
module.exports = {
  forbidden: [
    {
      name: "no-circular-imports",
      comment: "Two files that need each other are one file, or a third is missing. Types may point back.",
      severity: "error",
      from: {},
      to: { circular: true, viaOnly: { dependencyTypesNot: ["type-only"] } },
    },
    {
      name: "routes-are-the-top",
      comment: "Only the route table knows the routes; what they share belongs in a feature.",
      severity: "error",
      from: { path: "^(app/(features|statistics|ui|platform|middleware)|db|imports)/" },
      to: { path: "^app/routes/" },
    },
    {
      name: "features-meet-at-the-door",
      comment:
        "A feature uses another through the files at the top of its folder (<name>.server.ts, <name>.schema.ts, pure <name>.ts), never through its queries, components or mails.",
      severity: "error",
      from: { path: "^app/features/([^/]+)/" },
      to: {
        path: "^app/features/(?!$1/)[^/]+/([^/]+/|[^/]+\\.queries\\.server\\.ts$|[^/]+\\.tsx$)",
      },
    },
    {
      name: "queries-belong-to-their-feature",
      comment: "Routes and middleware call use cases; the SQL stays behind them.",
      severity: "error",
      from: { path: "^(app/(routes|middleware|ui)|imports)/" },
      to: { path: "\\.queries\\.server\\.ts$" },
    },
    {
      name: "statistics-stand-alone",
      comment: "The statistics are pure: they import nothing of ours.",
      severity: "error",
      from: { path: "^app/statistics/" },
      to: { path: "^(app/(?!statistics/)|db/|imports/|tests/)" },
    },
    {
      name: "ui-and-platform-know-no-trade",
      comment: "Neither holds a word of the trade, so neither may need a feature, a middleware or an import.",
      severity: "error",
      from: { path: "^app/(ui|platform)/" },
      to: { path: "^(app/(features|middleware|routes)|imports)/" },
    },
    {
      name: "db-is-below-the-features",
      comment: "Only the demo and the operator's command call the features: they use the real writes.",
      severity: "error",
      from: { path: "^db/", pathNot: "^db/(seed/|operator\\.ts$)" },
      to: { path: "^(app/(features|middleware|ui|statistics)|imports)/" },
    },
    {
      name: "sql-in-queries-only",
      comment:
        "The only SQL of a feature is in its <name>.queries.server.ts. Two exceptions: the visibility rule, which is a condition that every feature's queries put in, and identity, which has a pool of its own.",
      severity: "error",
      from: {
        path: "^(app|imports)/",
        pathNot:
          "^app/platform/|\\.queries\\.server\\.ts$|^app/features/roster/visibility\\.server\\.ts$|^app/features/accounts/identity\\.server\\.ts$",
      },
      to: { path: "(^|/)node_modules/(drizzle-orm|postgres|pg)/", dependencyTypesNot: ["type-only"] },
    },
    {
      name: "tests-stay-outside",
      comment: "Nothing that ships imports a test.",
      severity: "error",
      from: { path: "^(app|db|imports)/" },
      to: { path: "^tests/" },
    },
    {
      name: "no-development-package-in-the-product",
      comment: "What the running product imports is a dependency, not a development dependency.",
      severity: "error",
      from: { path: "^(app|db|imports)/", pathNot: "^app/(serve\\.mjs|routes\\.ts)$" },
      to: {
        dependencyTypes: ["npm-dev"],
        dependencyTypesNot: ["type-only"],
        pathNot: "node_modules/@types/",
      },
    },
    {
      name: "everything-resolves",
      severity: "error",
      from: {},
      to: { couldNotResolve: true, pathNot: "^virtual:|/\\+types/|\\?" },
    },
  ],
  options: {
    doNotFollow: { path: "node_modules" },
    exclude: { path: "^(tests/reference|build|\\.react-router)/|/\\+types/" },
    tsPreCompilationDeps: true,
    tsConfig: { fileName: "tsconfig.json" },
    enhancedResolveOptions: {
      exportsFields: ["exports"],
      conditionNames: ["import", "require", "node", "default", "types"],
      extensions: [".ts", ".tsx", ".mjs", ".js", ".cjs", ".json"],
      mainFields: ["module", "main", "types"],
    },
  },
};
