import type { Metadata, Viewport } from "next";
import { cookies } from "next/headers";
import type { ReactNode } from "react";
import { ApiProvider } from "@/trpc/client";
import "./globals.css";
import { SiteHeader } from "./site-header";

export const metadata: Metadata = {
  title: { default: "Weighhouse", template: "%s · Weighhouse" },
  description: "Physical hypotheses weighed in the open, on predictions filed before the data.",
};

export const viewport: Viewport = { width: "device-width", initialScale: 1 };

export default async function RootLayout({ children }: { children: ReactNode }) {
  const theme = (await cookies()).get("theme")?.value;
  return (
    <html lang="en" data-theme={theme === "light" || theme === "dark" ? theme : undefined}>
      <body>
        <ApiProvider>
          <SiteHeader />
          <main id="main" className="page-width pt-4 pb-10">
            {children}
          </main>
          <footer className="border-t border-rule py-4 text-[13.5px] text-quiet">
            <div className="page-width">
              <p className="max-w-[100ch]">
                A standing compares the hypotheses on one campaign&rsquo;s table under their stated
                priors and theory errors; it is not the probability that any of them is true. Where
                a campaign bears on hazards, decisions belong to the responsible authority and its
                own procedures.
              </p>
            </div>
          </footer>
        </ApiProvider>
      </body>
    </html>
  );
}
