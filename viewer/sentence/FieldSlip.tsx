import { fieldWords } from "../map/fieldwords.js";
import { Choice, type SlipProps } from "./parts.js";

/** Switches what the colours stand for: any array over the whole map. */
export function FieldSlip({ session, map, close }: SlipProps) {
  const own = session.own.value;
  const hasDepth = map.fields.some(({ name }) => name === "lag_depth");
  const counts = map.summary.estimator === "plugin" && map.measured !== "predictive";
  return (
    <>
      {map.fields.map((field) => {
        const { title, meaning } = fieldWords(field, map.measured);
        return (
          <Choice
            key={field.name}
            taken={session.field.value?.name === field.name}
            onTake={() => {
              session.shown.value = field.name;
              close();
            }}
          >
            <strong>{title}</strong> {meaning}
          </Choice>
        );
      })}
      {own === undefined || hasDepth || !counts ? null : (
        <Choice
          taken={false}
          onTake={() => {
            close();
            session.shown.value = "lag_depth";
            session.mapAgain({ request: { ...own.request, withDepth: true } });
          }}
        >
          <strong>Depth</strong> which lag told most of each value; maps the recording again
        </Choice>
      )}
    </>
  );
}
