/**
 * The walls of the house: imports go down only.
 *
 *   numerics, ledger <- campaign <- engine, tables, figures <- audit; store <- desk <- api <- apps
 *
 * A package may import the packages listed beside it and nothing else of ours.
 */
const mayImport = {
  numerics: [],
  ledger: [],
  campaign: ["ledger", "numerics"],
  engine: ["campaign", "numerics"],
  timestamps: [],
  tables: ["campaign"],
  figures: ["campaign"],
  audit: ["campaign", "engine", "ledger", "tables", "figures"],
  store: ["campaign", "ledger"],
  desk: ["audit", "campaign", "engine", "figures", "ledger", "store", "tables"],
  api: ["campaign", "desk", "store", "tables"],
};

const pure = [
  "numerics",
  "campaign",
  "engine",
  "ledger",
  "tables",
  "figures",
  "audit",
  "timestamps",
];

module.exports = {
  forbidden: [
    ...Object.entries(mayImport).map(([name, below]) => ({
      name: `${name}-imports-down-only`,
      severity: "error",
      comment: `packages/${name} may import only ${below.join(", ") || "no package of ours"}: data goes one way, and each room knows only the rooms below it.`,
      from: { path: `^packages/${name}/` },
      to: { path: "^(packages|apps)/", pathNot: `^packages/(${[name, ...below].join("|")})/` },
    })),
    {
      name: "pure-packages-touch-nothing",
      severity: "error",
      comment:
        "Pure packages run in the browser and in a referee's hands: no files, network, processes or database. node:crypto is let in at one place only, the ledger's hasher and signer for servers.",
      from: {
        path: `^packages/(${pure.join("|")})/`,
        pathNot: "\\.test\\.ts$|/testing/|^packages/ledger/src/node-",
      },
      to: { dependencyTypes: ["core"] },
    },
    {
      name: "cli-without-store",
      severity: "error",
      comment: "The command checks an audit trail without this software's server or database.",
      from: { path: "^apps/cli/" },
      to: { path: "^packages/(store|desk|api)/" },
    },
    {
      name: "apps-stand-alone",
      severity: "error",
      comment: "Apps share code through packages, never with one another.",
      from: { path: "^apps/([^/]+)/" },
      to: { path: "^apps/", pathNot: "^apps/$1/" },
    },
    {
      name: "no-circular",
      severity: "error",
      comment: "A cycle means that two files are one; say so or part them.",
      from: {},
      to: { circular: true, viaOnly: { dependencyTypesNot: ["type-only"] } },
    },
    {
      name: "not-to-unresolvable",
      severity: "error",
      comment: "Every import resolves to a declared dependency.",
      from: {},
      to: { couldNotResolve: true, pathNot: "^(server-only|\\.next/)|\\.css$" },
    },
  ],
  options: {
    tsPreCompilationDeps: true,
    doNotFollow: { path: "node_modules" },
    exclude: { path: "(^|/)(dist|\\.next)/" },
    webpackConfig: { fileName: require.resolve("./apps/web/import-alias.cjs") },
    enhancedResolveOptions: {
      exportsFields: ["exports"],
      conditionNames: ["import", "node", "default", "types"],
      extensions: [".ts", ".tsx", ".mts", ".js", ".mjs", ".cjs", ".json"],
    },
  },
};
