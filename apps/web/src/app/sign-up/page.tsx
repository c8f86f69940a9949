import type { Metadata } from "next";
import Link from "next/link";
import { Section } from "@/look/section";
import { safeNext } from "@/session/credentials";
import { SignUpForm } from "@/session/sign-up-form";

export const metadata: Metadata = { title: "Make an account" };

export default async function SignUpPage(props: {
  searchParams: Promise<{ next?: string | string[] }>;
}) {
  const next = safeNext((await props.searchParams).next);
  return (
    <>
      <h1 className="my-3">Make an account</h1>
      <Section title="Who you are">
        <SignUpForm next={next} />
        <p className="mt-4 text-quiet">
          Have one already?{" "}
          <Link className="link" href={`/sign-in?next=${encodeURIComponent(next)}`}>
            Sign in
          </Link>
          . With an account you can open a campaign of your own; a coordinator adds you to theirs.
        </p>
      </Section>
    </>
  );
}
