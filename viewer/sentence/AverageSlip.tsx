import type { ShownMap } from "../map/shownmap.js";

/** The averages over all windows. */
export function AverageSlip({ map }: { readonly map: ShownMap }) {
  const { summary } = map;
  const rows: readonly [string, string][] = [
    ["storage", bits(summary.storage_bits)],
    ["storage, bias taken off", bits(summary.storage_bits_corrected)],
    ["entropy of a value", bits(summary.entropy_bits)],
    ["what the past leaves open", bits(summary.entropy_rate_bits)],
    ["cells whose past misled", `${(100 * summary.negative_fraction).toFixed(1)} %`],
    ["windows counted", summary.samples.toLocaleString("en")],
    ["different pasts seen", summary.past_states_seen.toLocaleString("en")],
  ];
  return (
    <table class="slip-table">
      <caption class="unseen">Averages over all windows</caption>
      <tbody>
        {rows.map(([name, text]) => (
          <tr key={name}>
            <th scope="row">{name}</th>
            <td>{text}</td>
          </tr>
        ))}
      </tbody>
    </table>
  );
}

function bits(value: number): string {
  if (Number.isNaN(value)) return "no value";
  return `${value < 0 ? "−" : ""}${Math.abs(value).toFixed(4)} bit`;
}
