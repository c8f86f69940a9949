import type { Metadata } from "next";
import Link from "next/link";
import { Section } from "@/look/section";
import { safeNext } from "@/session/credentials";
import { SignInForm } from "@/session/sign-in-form";

export const metadata: Metadata = { title: "Sign in" };

export default async function SignInPage(props: {
  searchParams: Promise<{ next?: string | string[] }>;
}) {
  const next = safeNext((await props.searchParams).next);
  return (
    <>
      <h1 className="my-3">Sign in</h1>
      <Section title="Your account">
        <SignInForm next={next} />
        <p className="mt-4 text-quiet">
          No account yet?{" "}
          <Link className="link" href={`/sign-up?next=${encodeURIComponent(next)}`}>
            Make one
          </Link>
          . Public campaigns can be read without.
        </p>
      </Section>
    </>
  );
}
