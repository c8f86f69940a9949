import Link from "next/link";
import type { ReactNode } from "react";
import { Empty } from "@/look/notice";
import { Section } from "@/look/section";

/** What a page of members says to others, with the way in. */
export function MembersOnly(props: { path: string; signedIn: boolean; children: ReactNode }) {
  return (
    <Section title="For members">
      <Empty title="This page is for the campaign’s members.">
        {props.children}{" "}
        {props.signedIn ? (
          "Ask a coordinator to add your account."
        ) : (
          <>
            <Link className="link" href={`/sign-in?next=${encodeURIComponent(props.path)}`}>
              Sign in
            </Link>{" "}
            if you are one.
          </>
        )}
      </Empty>
    </Section>
  );
}
