import type { Manifest } from "./manifest";

/** What the README of an archive has to say of it. */
export type ReadmeFacts = Omit<Manifest, "files"> & {
  title: string;
  /** Of the key that signs the manifest. */
  fingerprint: string;
  keyPath: string;
  lastHeadPath: string;
  /** The key that signed the last head: another one after the keys were changed. */
  headKeyPath: string;
  /** How many heads have a time-stamp. */
  stamped: number;
};

const SIMULATED = `
**The clock of this ledger is simulated.** Its first entry says so: the times in it were given by
the program that filled it (a demonstration or a test), not read from a clock. Before and after data
mean nothing more here than the order of the entries.
`;

const STAMPED = `
The time-stamps are an authority's word that the heads were there by then. The authority's root
certificate is not in here, since whoever forges the one forges the other: get it from the authority,
as \`AUTHORITY.pem\`. The last line of each is the time:

\`\`\`bash
for stamp in heads/*.tsr; do
  openssl ts -verify -in "$stamp" -data "\${stamp%.tsr}.note" -CAfile AUTHORITY.pem
  openssl ts -reply -in "$stamp" -text | grep "Time stamp:"
done
echo "the time-stamps are good"
\`\`\`

`.trimStart();

/** The README of an archive: what it is, what to run, how to check it by hand. */
export function readmeText(facts: ReadmeFacts): string {
  return `# Audit trail of "${oneLine(facts.title)}"

Everything that was declared, predicted and measured in the campaign \`${facts.campaign}\`, in the
order in which it was put on record, with the standings that follow from it. Nothing here has to be
believed: all of it can be recomputed without the server that wrote it.
${facts.clock === "simulated" ? SIMULATED : ""}
| | |
| --- | --- |
| ledger | \`${facts.ledger}\` |
| entries | ${facts.size}, the last of ${facts.at} |
| root | \`${facts.root}\` |
| signed by | \`${facts.fingerprint}\` (SHA-256 of the public key) |
| engine | ${facts.engine} |

A signature says who signed, and anybody can sign. Compare the fingerprint with one that you got
another way, or the root with a tree head that you kept.

${contentWords(facts)}
## Check everything

With the \`weighhouse\` command, on the ZIP itself; nothing is sent anywhere:

    weighhouse verify AUDIT.zip
    weighhouse verify AUDIT.zip --key KEY.pub     # a key that you hold already
    weighhouse verify AUDIT.zip --head HEAD.note  # a tree head that you kept

It answers with a line for each check. Bayes factors, chi-squares and verdicts are computed anew
from the entries and compared to 1e-9; evidences that are integrated numerically, to their stated
errors.

Without it, in the folder into which the ZIP was unpacked, with Python 3 and nothing else; it names
what it doesn't cover:

    python3 check.py

${byHand(facts)}`;
}

function contentWords({ leftOut, heads }: ReadmeFacts): string {
  const left =
    leftOut.length === 0 ? "" : `\nNot in it:\n\n${leftOut.map((one) => `- ${one}`).join("\n")}\n`;
  return `## What is in it

| file | what |
| --- | --- |
| \`manifest.json\` | the SHA-256 of every file; \`manifest.note\` signs it |
| \`ro-crate-metadata.json\` | every file described, who posted what, sources (RO-Crate 1.2) |
| \`ledger.ndjson\` | an entry a line: number, time, author, kind, SHA-256 of its payload (RFC 8785) |
| \`payloads.ndjson\` | the payload of the entry in the same line |
| \`heads/*.note\` | signed tree heads (C2SP checkpoints), ${heads.kept} of ${heads.signed}; \`heads/*.tsr\` time-stamp them (RFC 3161) |
| \`keys/*.pub\` | the public keys that signed (Ed25519) |
| \`campaign.json\` | the campaign document that the entries add up to |
| \`standings.json\` | the standings that the engine computes from it |
| \`sensitivity.json\` | what the standings hang on: the campaign scored again with each thing changed |
| \`tables/*.csv\` | all of that as tables (RFC 4180, UTF-8), units in the header |
| \`tables/*.tex\` | the same rounded for print (LaTeX with booktabs; each compiles as it is) |
| \`figures/*.svg\` | standings, verdicts, evidence over time; one for each quantity |
| \`methods.md\` | what a methods section has to say, with its counts |
| \`check.py\` | another implementation of the checks, in Python's standard library |

Entries hold no names of people, only ids: \`member\` in an entry's \`by\`.
${left}`;
}

function byHand(facts: ReadmeFacts): string {
  return `## Check it by hand

With bash, sha256sum, openssl (3 or later) and jq, in the folder into which the ZIP was unpacked.
Each block ends in a line of its own when the check holds, and in an error when it doesn't.

Every file is the one in the manifest:

\`\`\`bash
jq -r '.files[] | .sha256 + "  " + .path' manifest.json | sha256sum --check --quiet
echo "the files are those of the manifest"
\`\`\`

Every payload is the one that its entry names:

\`\`\`bash
cmp <(jq -r .payloadSha256 ledger.ndjson) \\
    <(while IFS= read -r line; do printf '%s' "$line" | sha256sum | cut -c 1-64; done < payloads.ndjson)
echo "the payloads are those of the entries"
\`\`\`

The entries are numbered without gaps and their times increase:

\`\`\`bash
jq -es '[.[].seq] == [range(length)] and ([.[].at] | . == (unique | sort))' ledger.ndjson > order.txt
rm order.txt
echo "the entries are in order"
\`\`\`

The entries have the root that was signed. A leaf is SHA-256(00 || entry), a node
SHA-256(01 || left || right), and an odd one out rises as it is (RFC 6962, section 2.1):

\`\`\`bash
node() { printf '%b' "\\\\x01$(printf '%s' "$1$2" | sed 's/../\\\\x&/g')" | sha256sum | cut -c 1-64; }
row=($(while IFS= read -r line; do printf '\\0%s' "$line" | sha256sum | cut -c 1-64; done < ledger.ndjson))
while [ "\${#row[@]}" -gt 1 ]; do
  above=()
  for ((i = 0; i < \${#row[@]}; i += 2)); do
    if ((i + 1 < \${#row[@]})); then above+=("$(node "\${row[i]}" "\${row[i + 1]}")"); else above+=("\${row[i]}"); fi
  done
  row=("\${above[@]}")
done
signed=$(sed -n 3p ${facts.lastHeadPath} | openssl base64 -d -A | od -An -v -tx1 | tr -d ' \\n')
[ "$(sed -n 2p ${facts.lastHeadPath})" = "$(wc -l < ledger.ndjson | tr -d ' ')" ]
[ "\${row[0]}" = "$signed" ]
echo "the root is the signed one"
\`\`\`

The tree head and the manifest are signed:

\`\`\`bash
check() {
  { printf '\\060\\052\\060\\005\\006\\003\\053\\145\\160\\003\\041\\000'
    cut -d + -f 3- "$2" | openssl base64 -d -A | tail -c 32; } > key.der
  sed '/^$/,$d' "$1" > text.txt
  sed '1,/^$/d' "$1" | cut -d ' ' -f 3 | openssl base64 -d -A | tail -c 64 > signature.bin
  openssl pkeyutl -verify -pubin -keyform DER -inkey key.der -rawin -in text.txt -sigfile signature.bin
}
check ${facts.lastHeadPath} ${facts.headKeyPath}
check manifest.note ${facts.keyPath}
[ "$(sed -n 2p manifest.note)" = "$(sha256sum < manifest.json | cut -c 1-64)" ]
rm text.txt signature.bin
echo "the signatures are good"
\`\`\`

${facts.stamped > 0 ? STAMPED : ""}Whose key that is, in the form in which fingerprints are compared:

\`\`\`bash
tail -c 32 key.der | sha256sum | cut -c 1-64
rm key.der
\`\`\`
`;
}

function oneLine(text: string): string {
  return text.replaceAll(/\s+/g, " ");
}
