import type { CampaignDocument, Measurand, Observable } from "@weighhouse/campaign/document";
import type { MeasurandStanding, Standings } from "@weighhouse/campaign/standings";
import { measurandSvg } from "@weighhouse/figures/measurand-svg";
import type { MeasurandInput } from "@weighhouse/figures/measurand-svg";
import { ButtonLink } from "@/look/button";
import { FigureWithoutScript } from "@/look/figure-without-script";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";
import { unitText } from "@/look/unit-text";
import { rankedHypotheses } from "@/standings/table-rows";
import { MeasurandFacts } from "./measurand-facts";
import { MeasurandPlot } from "./measurand-plot";
import { MeasurementRows } from "./measurement-rows";
import { measurandPlot } from "./plot-data";
import type { Along, MeasurandPlotData } from "./plot-data";
import { predictedCurves } from "./predicted-curves";
import { PlotLegend } from "./plot-legend";
import { PredictionRows } from "./prediction-rows";
import type { PredictionRow } from "./prediction-rows";

/** One quantity: its plot, what each hypothesis says of it, its measurements, its declaration. */
export function MeasurandView(props: {
  document: CampaignDocument;
  standings: Standings | null;
  measurand: Measurand;
  observable: Observable;
}) {
  const { document, standings, measurand, observable } = props;
  const place = standings?.measurands.findIndex((each) => each.key === measurand.key) ?? -1;
  const standing = place < 0 ? null : (standings?.measurands[place] ?? null);
  const measurements = document.measurements.filter((each) => each.measurand === measurand.key);
  const rows = predictionRows(props);
  const plot = measurandPlot({
    measurand,
    observable,
    measurements,
    combined: standing?.combined ?? null,
    bands: rows.flatMap(({ hypothesis, verdict }) =>
      verdict && (verdict.row.lower !== null || verdict.row.upper !== null)
        ? [{ ...hypothesis, lower: verdict.row.lower, upper: verdict.row.upper }]
        : [],
    ),
  });
  const { along } = plot;
  const curves =
    along.by === "condition"
      ? predictedCurves({
          document,
          standings,
          measurand,
          condition: along.key,
          from: plot.x[0],
          to: plot.x[1],
        })
      : [];
  return (
    <>
      <div className="grid gap-x-5 lg:grid-cols-[1.9fr_1fr]">
        <Section title={measurand.title ?? measurand.key} gloss={observable.title} id="plot">
          {measurements.length > 0 || plot.bands.length > 0 ? (
            <>
              <p className="text-[13.5px] text-quiet">{axesWords(observable, along)}</p>
              <FigureWithoutScript
                label={`${measurand.title}: predictions and measurements, as in the tables below`}
                svg={measurandSvg(figureOf(measurand, observable, plot, standing), {
                  widthPx: 900,
                })}
              />
              <MeasurandPlot data={plot} curves={curves} />
              <PlotLegend data={plot} curves={curves} />
            </>
          ) : (
            <Empty title="Nothing is measured or predicted yet.">
              <p>Once a team predicts it or an observer measures it, both are drawn here.</p>
            </Empty>
          )}
        </Section>
        <Section title="As declared" id="declaration">
          <MeasurandFacts
            measurand={measurand}
            observable={observable}
            standing={standing}
            at={`/measurands/${place}`}
          />
        </Section>
      </div>
      <Section title="Predictions" gloss="with their theory error (tolerance)" id="predictions">
        {rows.length > 0 ? (
          <PredictionRows
            rows={rows}
            observable={observable}
            base={`/campaigns/${document.campaign.key}`}
          />
        ) : (
          <p className="text-quiet">No hypothesis is registered yet.</p>
        )}
      </Section>
      <Section title="Measurements" id="measurements">
        {measurements.length > 0 ? (
          <MeasurementRows
            measurements={measurements}
            observable={observable}
            facilities={document.facilities}
            sharedErrors={document.sharedErrors}
            base={`/campaigns/${document.campaign.key}`}
          />
        ) : (
          <Empty title="None yet.">
            <p className="mb-3">An observer posts the first; the page moves by itself then.</p>
            <ButtonLink href={`/campaigns/${document.campaign.key}/post`}>
              Post measurements
            </ButtonLink>
          </Empty>
        )}
      </Section>
    </>
  );
}

/** Of an axis without a title of its own: `in K, along Height above the bed (m)`. */
function axesWords({ unit }: Observable, along: Along): string {
  const values = unit && unit !== "1" ? `in ${unitText(unit)}` : "";
  if (along.by !== "condition") return values;
  const condition = along.unit === null ? "" : ` (${unitText(along.unit)})`;
  const words = `along ${along.title}${condition}`;
  return [values, words].filter((part) => part !== "").join(", ");
}

function figureOf(
  measurand: Measurand,
  observable: Observable,
  plot: MeasurandPlotData,
  standing: MeasurandStanding | null,
): MeasurandInput {
  return {
    key: measurand.key,
    title: measurand.title ?? measurand.key,
    observable,
    reference: plot.reference,
    predictions: plot.bands.map((band) => ({
      key: band.key,
      title: band.title,
      place: band.index,
      low: band.lower,
      high: band.upper,
    })),
    measurements: plot.points,
    combined: standing?.combined ?? null,
  };
}

function predictionRows(props: {
  document: CampaignDocument;
  standings: Standings | null;
  measurand: Measurand;
}): PredictionRow[] {
  const { document, standings, measurand } = props;
  const hypotheses = standings
    ? rankedHypotheses(standings, document).filter((each) => each.registered)
    : document.hypotheses.map(({ key, title }, index) => ({ key, title: title ?? key, index }));
  return hypotheses.map(({ key, title, index }) => {
    const place =
      standings?.verdicts.findIndex(
        (row) => row.hypothesis === key && row.measurand === measurand.key,
      ) ?? -1;
    const row = standings?.verdicts[place];
    return {
      hypothesis: { key, title, index },
      prediction:
        document.hypotheses[index]?.predictions.find((each) => each.measurand === measurand.key) ??
        null,
      verdict: row ? { row, at: `/verdicts/${place}` } : null,
    };
  });
}
