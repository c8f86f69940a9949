// Posts seven measurements at a time, as one batch, until it is killed; speaks after the first.
import { signerFromPem } from "@weighhouse/ledger/node-keys";
import { openStore } from "@weighhouse/store/open-store";
import { postMeasurements } from "@weighhouse/store/post-measurements";
import { hum, system } from "@weighhouse/store/testing/sample-campaign";

const [url = "", pem = "", name = ""] = process.argv.slice(2);
const store = await openStore({ url, signer: signerFromPem(pem, "house.example") });
for (let posting = 0; ; posting += 1) {
  const batch = `${name}-${posting}`;
  await postMeasurements(store, {
    campaign: "hum",
    by: system,
    measurements: Array.from({ length: 7 }, (_, index) => hum(`${batch}-${index}`, 95, { batch })),
  });
  if (posting === 0) process.stdout.write("posting\n");
}
