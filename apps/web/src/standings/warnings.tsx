import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Warning } from "@weighhouse/campaign/standings";
import { KeptLink } from "@/look/kept-link";
import { Notice } from "@/look/notice";
import { warnedPlace } from "./warned-place";

/** What each warning means to a reader, before the engine's own sentence. */
const words: Record<Warning["code"], string> = {
  "disagreeing-measurements": "Measurements of one quantity disagree.",
  "same-data-twice": "The same data are counted twice.",
  "vague-prediction": "A prediction says little.",
  "outside-reference": "Outside the no-model range.",
  "poor-reference": "The no-model range fits badly: silence is charged too much.",
  "every-hypothesis-fails": "No hypothesis describes the data.",
  "more-fails-than-chance": "More failed predictions than chance allows.",
  "approximate-evidence": "An evidence is approximate.",
  "common-ground-disagrees": "Silence decides between two hypotheses.",
  "filed-after-excluded": "Predictions filed after data are left out.",
  "registered-after-observation": "Filed when the data may already have been seen.",
  "unknown-unit": "A unit could not be converted.",
};

/** The standings' warnings in plain words, each with the engine's sentence and what it is about. */
export function Warnings(props: { warnings: readonly Warning[]; document: CampaignDocument }) {
  if (props.warnings.length === 0) {
    return <p className="text-quiet">None: nothing calls for a caveat.</p>;
  }
  return (
    <ul className="list-none">
      {props.warnings.map((warning, index) => (
        <li key={`${warning.code} ${warning.at} ${warning.text}`}>
          <Notice tone={warning.code === "every-hypothesis-fails" ? "bad" : "plain"}>
            <strong className="font-semibold">{words[warning.code]}</strong>{" "}
            <span data-at={`/warnings/${index}/text`}>{warning.text}</span>
            <PlaceLink at={warning.at} document={props.document} />
          </Notice>
        </li>
      ))}
    </ul>
  );
}

function PlaceLink({ at, document }: { at: string; document: CampaignDocument }) {
  const place = warnedPlace(at, document);
  if (place === null) return null;
  return (
    <>
      {" "}
      <KeptLink className="link" href={`/campaigns/${document.campaign.key}/${place.path}`}>
        {place.title}
      </KeptLink>
    </>
  );
}
