import { cookies } from "next/headers";
import Link from "next/link";
import { BeamMark } from "@/look/beam-mark";
import { readActor } from "@/server/reader";
import { SignOut } from "@/session/sign-out";
import { ThemeSwitch } from "@/session/theme-switch";

/** The strip above every page: the house, the list of campaigns, who is signed in. */
export async function SiteHeader() {
  const [actor, jar] = await Promise.all([readActor(), cookies()]);
  const theme = jar.get("theme")?.value;
  return (
    <header className="no-print border-b border-rule">
      <a
        href="#main"
        className="sr-only focus:not-sr-only focus:absolute focus:left-3 focus:top-2 focus:z-10 focus:bg-sheet focus:px-3 focus:py-1"
      >
        Skip to the page
      </a>
      <div className="page-width flex flex-wrap items-center gap-x-6 gap-y-1 py-2.5">
        <Link href="/campaigns" className="inline-flex items-center gap-2.5 no-underline">
          <BeamMark />
          <span className="font-serif text-[17px] font-semibold">Weighhouse</span>
        </Link>
        <nav aria-label="Site" className="flex-1">
          <Link href="/campaigns" className="text-quiet no-underline hover:text-ink">
            Campaigns
          </Link>{" "}
          <Link href="/programs" className="ml-4 text-quiet no-underline hover:text-ink">
            For programs
          </Link>
        </nav>
        <div className="flex flex-wrap items-center gap-x-4 gap-y-1 text-[14px]">
          <ThemeSwitch current={theme === "light" || theme === "dark" ? theme : "system"} />
          {actor ? (
            <>
              <span>{actor.name}</span>
              <SignOut />
            </>
          ) : (
            <>
              <Link className="link" href="/sign-in">
                Sign in
              </Link>
              <Link className="link" href="/sign-up">
                Make an account
              </Link>
            </>
          )}
        </div>
      </div>
    </header>
  );
}
