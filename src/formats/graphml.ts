import type { NodeColumn } from "../nodes/nodecolumn.js";
import type { Network } from "../recording/network.js";
import { escapedXml } from "./xmltext.js";

/**
 * A network with numbers for its nodes as GraphML. The id of a node is its name, and `label` says it
 * again for programs that look there; the links carry `weight`. Numbers are written so that they read
 * back to the same bits; NaN is left out.
 */
export function graphmlText(network: Network, columns: readonly NodeColumn[]): string {
  const { names, sources, targets, weights, directed } = network;
  const keys = columns.map(
    ({ name, values }, i) =>
      `  <key id="d${i}" for="node" attr.name="${escapedXml(name)}" attr.type="${typeOf(values)}"/>`,
  );
  const nodes = names.map((name, node) => {
    const data = columns.flatMap(({ values }, i) =>
      Number.isNaN(values[node]) ? [] : [`      <data key="d${i}">${values[node]}</data>`],
    );
    return [
      `    <node id="${escapedXml(name)}">`,
      `      <data key="label">${escapedXml(name)}</data>`,
      ...data,
      "    </node>",
    ].join("\n");
  });
  const links = Array.from(sources, (source, i) => {
    const ends = `source="${escapedXml(names[source])}" target="${escapedXml(names[targets[i]])}"`;
    return `    <edge id="e${i}" ${ends}><data key="weight">${weights[i]}</data></edge>`;
  });
  return [
    '<?xml version="1.0" encoding="UTF-8"?>',
    '<graphml xmlns="http://graphml.graphdrawing.org/xmlns">',
    '  <key id="label" for="node" attr.name="label" attr.type="string"/>',
    '  <key id="weight" for="edge" attr.name="weight" attr.type="double"/>',
    ...keys,
    `  <graph edgedefault="${directed ? "directed" : "undirected"}">`,
    ...nodes,
    ...links,
    "  </graph>",
    "</graphml>",
    "",
  ].join("\n");
}

const MOST_INT = 2 ** 31 - 1;

function typeOf(values: Float64Array): "int" | "double" {
  const whole = values.every(
    (value) => Number.isNaN(value) || (Number.isInteger(value) && Math.abs(value) <= MOST_INT),
  );
  return whole ? "int" : "double";
}
