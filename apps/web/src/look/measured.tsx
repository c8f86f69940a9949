import { formatNumber, roundToUncertainty, timesTenTo } from "@weighhouse/figures/numbers";
import { Num } from "./number";
import { unitText } from "./unit-text";

/**
 * A value with its uncertainty and unit, rounded together; each of the two numbers says its own
 * place in the standings document. On a log10 scale the uncertainty is in dex.
 */
export function Measured(props: {
  value: number;
  sd: number | null;
  scale: string;
  unit: string | null;
  /** JSON Pointer of the object that holds value and sd. */
  at?: string;
  /** What the value is called there: `value`, or `mean`. */
  valueName?: "value" | "mean";
}) {
  const { value, sd, at } = props;
  const unit = props.unit !== null && props.unit !== "1" ? `\u00a0${unitText(props.unit)}` : "";
  const valueAt = at ? `${at}/${props.valueName ?? "value"}` : undefined;
  if (sd === null || !(sd > 0)) {
    return (
      <span className="whitespace-nowrap">
        <Num text={formatNumber(value)} exact={value} at={valueAt} />
        {unit}
      </span>
    );
  }
  const dex = props.scale === "log10";
  const rounded = roundToUncertainty(value, dex ? Math.abs(value) * Math.LN10 * sd : sd);
  const spread = dex ? roundToUncertainty(0, sd).uncertainty : rounded.uncertainty;
  const power = rounded.exponent === 0 ? "" : ` ${timesTenTo(rounded.exponent)}`;
  const bracketed = power !== "" && !dex;
  return (
    <span className="whitespace-nowrap">
      {bracketed ? "(" : ""}
      <Num text={rounded.value} exact={value} at={valueAt} />
      {dex ? power + unit : ""} ± <Num text={spread} exact={sd} at={at ? `${at}/sd` : undefined} />
      {dex ? "\u00a0dex" : `${bracketed ? ")" : ""}${power}${unit}`}
    </span>
  );
}
