/**
 * Checks audit trails and tables with what a referee or an observer has at hand and this project
 * doesn't bring: Debian's python3 runs an archive's check.py, its jq, openssl and sha256sum the
 * README's commands as printed, its LaTeX the tables; its astropy reads measurements in ECSV and
 * VOTable; its curl and python3 run the examples of the API's README against a server. Installs them
 * with apt-get where one is missing and this is root (some 65 MB of packages, half of them TeX's).
 *
 *   node test/debian-tools.mjs [REPORT.json]
 *
 * Ends with 3 where a tool is missing and could not be installed.
 */
import { spawnSync } from "node:child_process";
import { existsSync } from "node:fs";
import path from "node:path";

const root = path.resolve(import.meta.dirname, "..");
const report = process.argv[2];
/** Tells the caller that nothing was tested, as opposed to a test that failed. */
const NOT_RUN = 3;

/** What each package is there for; texlive-latex-recommended holds booktabs. */
const packages = {
  python3: "/usr/bin/python3",
  "python3-astropy": "/usr/lib/python3/dist-packages/astropy/__init__.py",
  curl: "/usr/bin/curl",
  jq: "/usr/bin/jq",
  openssl: "/usr/bin/openssl",
  "texlive-latex-base": "/usr/bin/pdflatex",
  "texlive-latex-recommended": "/usr/share/texlive/texmf-dist/tex/latex/booktabs/booktabs.sty",
};
const missing = () => Object.keys(packages).filter((name) => !existsSync(packages[name]));

if (missing().length > 0) install(missing());
if (missing().length > 0) {
  console.error(
    `outside checks of archives and of the API's README NOT RUN: without ${missing().join(", ")}`,
  );
  process.exit(NOT_RUN);
}

const tests = spawnSync(
  process.execPath,
  [
    path.join(root, "node_modules/vitest/vitest.mjs"),
    "run",
    "--config",
    path.join(root, "test/archive/vitest.config.ts"),
    ...(report === undefined
      ? []
      : ["--reporter=default", "--reporter=json", `--outputFile.json=${path.resolve(report)}`]),
  ],
  { cwd: root, stdio: "inherit" },
);
process.exit(tests.status ?? 1);

function install(names) {
  if (process.getuid?.() !== 0 || !existsSync("/usr/bin/apt-get")) return;
  const env = { ...process.env, DEBIAN_FRONTEND: "noninteractive" };
  const apt = (...args) => spawnSync("apt-get", args, { stdio: "inherit", env });
  apt("update", "-qq");
  apt("install", "-qq", "-y", "--no-install-recommends", ...names);
}
