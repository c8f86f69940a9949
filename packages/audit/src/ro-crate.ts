import type { LedgerRecord } from "@weighhouse/campaign/changes";
import type { CampaignDocument } from "@weighhouse/campaign/document";
import * as layout from "./layout";
import type { Manifest } from "./manifest";

/** A file as the description lists it; the description and the manifest can't list themselves. */
export type DescribedFile = { path: string; bytes: number; sha256: string };

export type CrateFacts = {
  document: CampaignDocument;
  records: readonly LedgerRecord[];
  manifest: Pick<
    Manifest,
    "campaign" | "ledger" | "size" | "root" | "at" | "engine" | "people" | "licence"
  >;
  files: readonly DescribedFile[];
};

type Entity = { "@id": string; "@type": string | string[]; [property: string]: unknown };

const VERSION = "https://w3id.org/ro/crate/1.2";

/**
 * `ro-crate-metadata.json`: the archive described by RO-Crate 1.2 (JSON-LD): the metadata
 * descriptor, the root data entity, every file, who posted what, and what was computed with what.
 * People are named by the ledger's opaque ids, and by name and ORCID where they published those.
 *
 * Source: https://www.researchobject.org/ro-crate/specification/1.2/
 */
export function crateOf(facts: CrateFacts): object {
  const { document, records, manifest, files } = facts;
  const people = peopleOf(records, manifest.people);
  const teams = document.teams.map(({ key, title }): Entity => ({
    "@id": `#team-${key}`,
    "@type": "Organization",
    name: title ?? key,
  }));
  const described = [
    ...files,
    { path: layout.MANIFEST, bytes: null, sha256: null },
    { path: layout.MANIFEST_NOTE, bytes: null, sha256: null },
  ];
  const sources = sourcesOf(document);
  return {
    "@context": `${VERSION}/context`,
    "@graph": [
      {
        "@id": layout.CRATE,
        "@type": "CreativeWork",
        about: { "@id": "./" },
        conformsTo: { "@id": VERSION },
      },
      rootOf(facts, { described, people, teams, sources }),
      ...licenceOf(manifest.licence),
      ...described.map(fileEntity),
      actionOf(manifest),
      {
        "@id": "#engine",
        "@type": "SoftwareApplication",
        name: "Weighhouse engine",
        softwareVersion: manifest.engine,
      },
      ...people,
      ...teams,
      ...sources,
    ],
  };
}

function rootOf(
  { document, manifest }: CrateFacts,
  parts: { described: { path: string }[]; people: Entity[]; teams: Entity[]; sources: Entity[] },
): Entity {
  const { campaign } = document;
  return {
    "@id": "./",
    "@type": "Dataset",
    name: `Audit trail of “${campaign.title}”`,
    description:
      campaign.summary ??
      "Everything that was declared, predicted and measured in a campaign, in the order in which it was put on record, with the standings that follow from it.",
    datePublished: manifest.at,
    license: { "@id": manifest.licence ?? "#no-licence" },
    identifier: `${manifest.ledger} ${manifest.size} ${manifest.root}`,
    creator: references([...parts.people, ...parts.teams]),
    citation: references(parts.sources),
    mentions: { "@id": "#scoring" },
    hasPart: parts.described.map(({ path }) => ({ "@id": path })),
  };
}

/** The specification wants a licence; where none was given, that is what is said. */
function licenceOf(licence: string | null): Entity[] {
  if (licence !== null) return [{ "@id": licence, "@type": "CreativeWork", name: licence }];
  return [
    {
      "@id": "#no-licence",
      "@type": "CreativeWork",
      name: "No licence given",
      description: "Those who run the campaign stated no licence: ask them before reuse.",
    },
  ];
}

function fileEntity(file: { path: string; bytes: number | null; sha256: string | null }): Entity {
  const { format, about } = kindOf(file.path);
  return {
    "@id": file.path,
    "@type": "File",
    name: file.path.slice(file.path.lastIndexOf("/") + 1),
    description: about,
    encodingFormat: format,
    ...(file.bytes === null ? {} : { contentSize: String(file.bytes), sha256: file.sha256 }),
  };
}

type Kind = { format: string; about: string };

const KINDS: [pattern: RegExp, kind: Kind][] = [
  [/^README\.md$/, { format: "text/markdown", about: "What this is and how to check it" }],
  [/^methods\.md$/, { format: "text/markdown", about: "For a methods section" }],
  [/^manifest\.json$/, { format: "application/json", about: "SHA-256 of every file" }],
  [/^manifest\.note$/, { format: "text/plain", about: "Signature over manifest.json (C2SP note)" }],
  [/^ledger\.ndjson$/, { format: "application/x-ndjson", about: "Every entry, canonical" }],
  [
    /^payloads\.ndjson$/,
    { format: "application/x-ndjson", about: "Every entry's payload, canonical" },
  ],
  [/^campaign\.json$/, { format: "application/json", about: "The campaign document" }],
  [/^standings\.json$/, { format: "application/json", about: "The standings document" }],
  [/^sensitivity\.json$/, { format: "application/json", about: "What the standings hang on" }],
  [
    /^check\.py$/,
    { format: "text/x-python", about: "An independent check (Python 3, standard library)" },
  ],
  [/\.note$/, { format: "text/plain", about: "Signed tree head (C2SP checkpoint)" }],
  [
    /\.tsr$/,
    { format: "application/timestamp-reply", about: "Time-stamp of a tree head (RFC 3161)" },
  ],
  [/\.pub$/, { format: "text/plain", about: "Public key (Ed25519, C2SP verifier key)" }],
  [/\.csv$/, { format: "text/csv", about: "Table (RFC 4180)" }],
  [/\.tex$/, { format: "application/x-tex", about: "The table for print (LaTeX, booktabs)" }],
  [/\.svg$/, { format: "image/svg+xml", about: "Figure" }],
];

function kindOf(path: string): Kind {
  const kind = KINDS.find(([pattern]) => pattern.test(path))?.[1];
  return kind ?? { format: "application/octet-stream", about: path };
}

/** The standings are made of the document by the engine. */
function actionOf({ at }: CrateFacts["manifest"]): Entity {
  return {
    "@id": "#scoring",
    "@type": "CreateAction",
    name: "Scoring",
    endTime: at,
    instrument: { "@id": "#engine" },
    object: { "@id": layout.DOCUMENT },
    result: { "@id": layout.STANDINGS },
  };
}

function peopleOf(records: readonly LedgerRecord[], published: Manifest["people"]): Entity[] {
  const profiles = new Map(published.map((profile) => [profile.member, profile]));
  const entries = new Map<string, { team: string | null; kinds: Map<string, number> }>();
  for (const { by, kind } of records) {
    if ("system" in by) continue;
    const member = entries.get(by.member) ?? { team: by.team, kinds: new Map<string, number>() };
    member.kinds.set(kind, (member.kinds.get(kind) ?? 0) + 1);
    entries.set(by.member, { ...member, team: by.team ?? member.team });
  }
  return [...entries].map(([member, { team, kinds }]) => {
    const profile = profiles.get(member);
    const made = [...kinds].map(([kind, count]) => `${kind}: ${count}`).join(", ");
    return {
      "@id": profile?.orcid ?? `#member-${member}`,
      "@type": "Person",
      name: profile?.name ?? member,
      identifier: member,
      description: `Entries made: ${made}`,
      ...(team === null ? {} : { affiliation: { "@id": `#team-${team}` } }),
    };
  });
}

/** Sources that are addresses are things of their own; others are in the table of measurements. */
function sourcesOf({ measurements }: CampaignDocument): Entity[] {
  const addresses = new Set(
    measurements.flatMap(({ source }) => {
      if (source === null) return [];
      if (/^https?:\/\/\S+$/.test(source)) return [source];
      const doi = /^(?:doi:\s*)?(10\.\d{4,9}\/\S+)$/i.exec(source)?.[1];
      return doi === undefined ? [] : [`https://doi.org/${doi}`];
    }),
  );
  return [...addresses].map((address) => ({
    "@id": address,
    "@type": "CreativeWork",
    name: address,
  }));
}

function references(entities: readonly Entity[]): { "@id": string }[] {
  return entities.map((entity) => ({ "@id": entity["@id"] }));
}
