import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { Standings, Warning } from "@weighhouse/campaign/standings";
import { KeptLink } from "@/look/kept-link";
import { Notice } from "@/look/notice";
import { warningWords, type WarningWord } from "./warning-words";

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
export function Warnings(props: { standings: Standings; document: CampaignDocument }) {
  const { warnings, pairs } = props.standings;
  if (warnings.length === 0) {
    return <p className="text-quiet">None: nothing calls for a caveat.</p>;
  }
  return (
    <ul className="list-none">
      {warnings.map((warning, index) => (
        <li key={`${warning.code} ${warning.at} ${warning.text}`}>
          <Notice tone={warning.code === "every-hypothesis-fails" ? "bad" : "plain"}>
            <strong className="font-semibold">{words[warning.code]}</strong>{" "}
            <span data-at={`/warnings/${index}/text`}>
              <Sentence
                words={warningWords(warning, props.document, pairs)}
                base={`/campaigns/${props.document.campaign.key}`}
              />
            </span>
          </Notice>
        </li>
      ))}
    </ul>
  );
}

function Sentence(props: { words: WarningWord[]; base: string }) {
  return props.words.map(({ text, path }) =>
    path === undefined ? (
      text
    ) : (
      <KeptLink key={path} className="link" href={`${props.base}/${path}`}>
        {text}
      </KeptLink>
    ),
  );
}
