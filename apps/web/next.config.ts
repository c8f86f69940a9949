import type { NextConfig } from "next";

const ours = [
  "api",
  "audit",
  "campaign",
  "desk",
  "engine",
  "figures",
  "ledger",
  "numerics",
  "store",
  "tables",
].map((name) => `@weighhouse/${name}`);

/** The content policy carries a nonce a request and is set in src/proxy.ts; these are the same for all. */
const securityHeaders = [
  { key: "X-Content-Type-Options", value: "nosniff" },
  { key: "X-Frame-Options", value: "DENY" },
  { key: "Referrer-Policy", value: "same-origin" },
  { key: "Cross-Origin-Opener-Policy", value: "same-origin" },
  { key: "Permissions-Policy", value: "camera=(), geolocation=(), microphone=(), payment=()" },
];

const config: NextConfig = {
  transpilePackages: ours,
  // Types are checked by `tsc -p apps/web`, as in every package, so the build does not do it again.
  typescript: { ignoreBuildErrors: true },
  poweredByHeader: false,
  reactStrictMode: true,
  serverExternalPackages: ["postgres", "pino"],
  headers: async () => [{ source: "/:path*", headers: securityHeaders }],
};

export default config;
