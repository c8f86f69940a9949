import { Empty } from "@/look/notice";
import { ButtonLink } from "@/look/button";
import { readActor } from "@/server/reader";

export default async function NotFound() {
  const signedIn = (await readActor()) !== null;
  return (
    <div className="py-8">
      <h1 className="mb-3">Not here</h1>
      <Empty title="Nothing stands at this address, or it is not for you to see.">
        <p>A campaign for members only is shown once you are signed in as one of them.</p>
      </Empty>
      <div className="mt-4 flex gap-3">
        <ButtonLink href="/campaigns">All campaigns</ButtonLink>
        {signedIn ? null : <ButtonLink href="/sign-in">Sign in</ButtonLink>}
      </div>
    </div>
  );
}
