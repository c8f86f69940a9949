import type { Metadata } from "next";
import Link from "next/link";
import { CampaignFrame } from "@/campaign/campaign-frame";
import { MeasurementActions } from "@/forms/records/measurement-actions";
import { Notice } from "@/look/notice";
import { Section } from "@/look/section";
import { sameDataAs } from "@/measurement/same-data";
import { SameDataRows } from "@/measurement/same-data-rows";
import { VersionRows } from "@/measurement/version-rows";
import { readCampaign, sizeFrom } from "@/server/campaign";
import { readFor } from "@/server/reader";

interface Props {
  params: Promise<{ key: string; id: string }>;
  searchParams: Promise<{ size?: string | string[] }>;
}

export async function generateMetadata(props: Props): Promise<Metadata> {
  return { title: `Measurement ${decodeURIComponent((await props.params).id)}` };
}

export default async function MeasurementPage(props: Props) {
  const { key, id: encoded } = await props.params;
  const id = decodeURIComponent(encoded);
  const size = sizeFrom(await props.searchParams);
  const base = `/campaigns/${key}`;
  const { document, role, team } = await readCampaign(key, size);
  const versions = await readFor(`${base}/measurements/${encoded}`, (caller) =>
    caller.measurements.history({ key, id, ...(size === null ? {} : { size }) }),
  );
  const newest = versions.at(-1)!;
  const { postedAt: _, ...measurement } = newest.measurement;
  const measurand = document.measurands.find((each) => each.key === measurement.measurand);
  const kinds = new Map(document.observables.map((each) => [each.key, each]));
  const observables = new Map(
    document.measurands.flatMap((each) => {
      const kind = kinds.get(each.observable);
      return kind === undefined ? [] : [[each.key, kind] as const];
    }),
  );
  const sameData = sameDataAs(document, measurement);
  const own =
    role === "coordinator" ||
    (role === "member" && team === measurement.team && (team !== null || versions[0]!.own));
  return (
    <CampaignFrame campaignKey={key} size={size}>
      <Section title={`Measurement ${id}`} gloss="all that it ever was" id="history">
        <p className="mb-3 text-[14px]">
          <Link className="link" href={`${base}/quantities/${measurement.measurand}`}>
            {measurand?.title ?? measurement.measurand}
          </Link>
          {measurement.facility === null
            ? null
            : `, by ${document.facilities.find((each) => each.key === measurement.facility)?.title ?? measurement.facility}`}
        </p>
        {newest.withdrawn ? (
          <Notice label="Withdrawn.">
            The standings are as if it had never been posted: {newest.reason}
          </Notice>
        ) : null}
        <VersionRows versions={versions} observables={observables} path={`${base}/ledger`} />
      </Section>
      {sameData.some((one) => one.id !== id) ? (
        <Section title="From the same data" gloss={measurement.sameData} id="same-data">
          <SameDataRows
            measurement={measurement}
            all={sameData}
            observables={observables}
            path={`${base}/measurements`}
          />
        </Section>
      ) : null}
      {own && size === null && !newest.withdrawn ? (
        <MeasurementActions document={document} measurement={measurement} />
      ) : null}
    </CampaignFrame>
  );
}
