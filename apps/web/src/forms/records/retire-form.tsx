"use client";

import { useTRPCClient } from "@/trpc/client";
import { ReasonForm } from "./reason-form";

/** Its team stands behind a hypothesis no more; it stays where it is, with its standing. */
export function RetireForm(props: { campaign: string; hypothesis: string }) {
  const client = useTRPCClient();
  const { campaign: key, hypothesis } = props;
  return (
    <ReasonForm
      name={`retire:${key}:${hypothesis}`}
      label="Retire this hypothesis"
      button="Retire hypothesis"
      help="Why you stand behind it no more. It stays, and what it predicted goes on being judged; nothing can be added to it."
      done="It is retired."
      send={(reason) => client.hypotheses.retire.mutate({ key, hypothesis, reason })}
    />
  );
}
