import { KEYS } from "../field/keys.js";
import type { Session } from "../page/session.js";
import { AverageSlip } from "./AverageSlip.js";
import { FieldSlip } from "./FieldSlip.js";
import { HistorySlip } from "./HistorySlip.js";
import { OrderSlip } from "./OrderSlip.js";
import { PoolSlip } from "./PoolSlip.js";
import { SizeSlip } from "./SizeSlip.js";
import { Slip } from "./Slip.js";
import { StatesSlip } from "./StatesSlip.js";
import type { Slips } from "./slips.js";
import { TitleSlip } from "./TitleSlip.js";

interface Props {
  readonly session: Session;
  readonly slips: Slips;
}

/** Whatever slip is open. */
export function SlipContent({ session, slips }: Props) {
  const map = session.map.value;
  const name = slips.value?.name;
  if (name === undefined) return null;
  const close = (): void => {
    slips.value = undefined;
  };
  if (name === "keys") {
    return (
      <Slip slips={slips} label="What the keys do">
        <p class="slip-title">On the field</p>
        <dl class="keys">
          {KEYS.map(([keys, does]) => (
            <div key={keys}>
              <dt>{keys}</dt>
              <dd>{does}</dd>
            </div>
          ))}
        </dl>
      </Slip>
    );
  }
  if (map === undefined) return null;
  const props = { session, map, close };
  switch (name) {
    case "field":
      return (
        <Slip slips={slips} label="What is drawn">
          <FieldSlip {...props} />
        </Slip>
      );
    case "title":
      return (
        <Slip slips={slips} label="The recording">
          <TitleSlip {...props} />
        </Slip>
      );
    case "size":
      return (
        <Slip slips={slips} label="How its places lie">
          <SizeSlip {...props} />
        </Slip>
      );
    case "order":
      return (
        <Slip slips={slips} label="In which order the nodes stand">
          <OrderSlip {...props} />
        </Slip>
      );
    case "history":
      return (
        <Slip slips={slips} label="History">
          <HistorySlip {...props} />
        </Slip>
      );
    case "states":
      return (
        <Slip slips={slips} label="States">
          <StatesSlip {...props} />
        </Slip>
      );
    case "pool":
      return (
        <Slip slips={slips} label="Which places share a model">
          <PoolSlip {...props} />
        </Slip>
      );
    case "average":
      return (
        <Slip slips={slips} label="Averages">
          <AverageSlip map={map} />
        </Slip>
      );
    case "cautions":
      return (
        <Slip slips={slips} label="What to beware of">
          <ul class="slip-list">
            {map.summary.warnings.map((warning) => (
              <li key={warning}>{warning}</li>
            ))}
          </ul>
        </Slip>
      );
  }
}
