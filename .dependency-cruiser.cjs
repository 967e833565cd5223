/**
 * Imports run downwards only:
 * recording < states < storage < reach, evidence, structures, nodes < report, formats < run < cli, viewer.
 * Kernels know typed arrays and nothing else.
 */
const floors = [
  ["recording"],
  ["states"],
  ["storage"],
  ["reach", "evidence", "structures", "nodes"],
  ["report", "formats"],
  ["run"],
  ["cli"],
];

const upward = floors.flatMap((rooms, floor) =>
  rooms.map((room) => {
    const allowed = floors.slice(0, floor).flat();
    const peers = [room, ...allowed, ...(floor >= 2 && floor <= 5 ? ["kernels"] : [])];
    return {
      name: `${room}-imports-downwards`,
      severity: "error",
      from: { path: `^src/${room}/` },
      to: { path: "^(src|viewer|samples)/", pathNot: `^src/(${peers.join("|")})/` },
    };
  }),
);

module.exports = {
  forbidden: [
    ...upward.filter((rule) => !rule.name.startsWith("cli-")),
    {
      name: "cli-imports-downwards",
      severity: "error",
      from: { path: "^src/cli/" },
      to: { path: "^viewer/" },
    },
    {
      name: "kernels-know-typed-arrays-only",
      severity: "error",
      from: { path: "^src/kernels/" },
      to: { pathNot: "^src/kernels/" },
    },
    {
      name: "no-platform-below-run",
      severity: "error",
      from: {
        path: "^src/(recording|states|kernels|storage|reach|evidence|structures|nodes|formats|report)/",
      },
      to: { dependencyTypes: ["core"] },
    },
    {
      name: "library-knows-no-viewer",
      severity: "error",
      from: { path: "^src/" },
      to: { path: "^viewer/" },
    },
    { name: "no-cycles", severity: "error", from: {}, to: { circular: true } },
    { name: "everything-resolves", severity: "error", from: {}, to: { couldNotResolve: true } },
  ],
  options: {
    doNotFollow: { path: "node_modules" },
    exclude: { path: "src/kernels/(assembly|binary|build)" },
    tsConfig: { fileName: "tsconfig.json" },
    tsPreCompilationDeps: true,
    enhancedResolveOptions: { exportsFields: ["exports"], conditionNames: ["import", "types"] },
  },
};
