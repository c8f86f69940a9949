"use client";

import type { ListedWebhook } from "@weighhouse/desk/list-webhooks";
import { formatNumber } from "@weighhouse/figures/numbers";
import { useRouter } from "next/navigation";
import { useEffect } from "react";
import { Notice } from "@/look/notice";
import { Time } from "@/look/time";
import { DeliveryRows } from "./delivery-rows";
import { WebhookActions } from "./webhook-actions";

const LOOK_AGAIN_MS = 1000;

/** One webhook: what it is told, whether it is on, what was sent to it. */
export function WebhookView(props: { campaign: string; webhook: ListedWebhook }) {
  const { campaign, webhook } = props;
  const { url, deliveries, switchedOffAt, switchedOffWhy } = webhook;
  useLookAgain(deliveries.some(({ what, tries }) => what === "test" && tries === 0));
  return (
    <li className="border-b border-rule py-3 first:pt-0 last:border-b-0 last:pb-0">
      <h3 className="break-all text-[15px] font-semibold">{url}</h3>
      <dl className="facts mt-1 mb-2">
        <dt>Told of</dt>
        <dd>{toldInWords(webhook)}</dd>
        <dt>Made</dt>
        <dd>
          <Time at={webhook.madeAt} />
        </dd>
        <dt>Last arrived</dt>
        <dd>
          {webhook.lastDeliveredAt === null ? "nothing yet" : <Time at={webhook.lastDeliveredAt} />}
        </dd>
      </dl>
      {switchedOffAt === null ? null : (
        <Notice tone="bad" label="Switched off">
          on <Time at={switchedOffAt} />: {switchedOffWhy}. Nothing is told until you switch it on
          again; what moves meanwhile is told then.
        </Notice>
      )}
      <WebhookActions campaign={campaign} id={webhook.id} off={switchedOffAt !== null} />
      {deliveries.length === 0 ? null : <DeliveryRows deliveries={deliveries} url={url} />}
    </li>
  );
}

function toldInWords({ movedBy, turned }: ListedWebhook): string {
  const moves =
    movedBy === null
      ? []
      : [`a hypothesis that moves by more than ${formatNumber(movedBy)} in log₁₀ B`];
  return [...moves, ...(turned ? ["verdicts that turn"] : [])].join("; ");
}

/** A test that was just asked for is under way: how it went is there in a moment. */
function useLookAgain(waiting: boolean) {
  const router = useRouter();
  useEffect(() => {
    if (!waiting) return;
    const timer = setInterval(() => router.refresh(), LOOK_AGAIN_MS);
    return () => clearInterval(timer);
  }, [waiting, router]);
}
