"use client";

import type { CampaignDocument } from "@weighhouse/campaign/document";
import type { MeasurementContent } from "@weighhouse/campaign/entries";
import { Section } from "@/look/section";
import { useTRPCClient } from "@/trpc/client";
import { CorrectAsJson } from "./correct-as-json";
import { CorrectForm } from "./correct-form";
import { isPlain } from "./correction-draft";
import { ReasonForm } from "./reason-form";

/** What may be done to a measurement by whose it is: each for a stated reason, each on record. */
export function MeasurementActions(props: {
  document: CampaignDocument;
  measurement: MeasurementContent;
}) {
  const { document, measurement } = props;
  const client = useTRPCClient();
  const { key } = document.campaign;
  const { id } = measurement;
  return (
    <>
      <Section title="Correct it" gloss="the old content stays on record" id="correct">
        {isPlain(measurement) ? <CorrectForm {...props} /> : <CorrectAsJson {...props} />}
      </Section>
      <div className="grid items-start gap-x-5 lg:grid-cols-2">
        {measurement.setAside === null ? (
          <Section title="Set it aside" gloss="listed, not counted" id="set-aside">
            <ReasonForm
              name={`set-aside:${key}:${id}`}
              label="Set this measurement aside"
              button="Set aside"
              help="Why it doesn’t count: clouds, a loose cable, no uncertainty given."
              done="It is set aside: listed, and not counted."
              send={(reason) => client.measurements.setAside.mutate({ key, id, reason })}
            />
          </Section>
        ) : null}
        <Section title="Withdraw it" gloss="as if it had never been posted" id="withdraw">
          <ReasonForm
            name={`withdraw:${key}:${id}`}
            label="Withdraw this measurement"
            button="Withdraw"
            help="Why it should never have been here. Its entry stays in the ledger; its id can’t be used again."
            done="It is withdrawn."
            send={(reason) =>
              client.measurements.withdraw.mutate({
                key,
                selection: { by: "ids", ids: [id] },
                reason,
              })
            }
          />
        </Section>
      </div>
    </>
  );
}
