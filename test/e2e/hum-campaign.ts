import type { Page } from "@playwright/test";
import { expect } from "@playwright/test";
import type { Person } from "./people";

// An invented campaign: why a bridge hums in the wind.
const measurand = (key: string, title: string, from: string, to: string) => ({
  key,
  title,
  observable: "hum",
  window: { from: `2024-${from}-01T00:00:00Z`, to: `2024-${to}-01T00:00:00Z` },
  reference: { family: "uniform", lower: 0, upper: 400 },
});
const document = {
  format: "weighhouse-campaign/1",
  campaign: { key: "bridge", title: "Why the bridge hums" },
  observables: [
    {
      key: "hum",
      title: "Pitch of the hum",
      unit: "Hz",
      scale: "linear",
      conditions: [{ key: "wind", title: "Wind", unit: "m/s" }],
    },
  ],
  measurands: [
    measurand("march", "Hum in March", "03", "04"),
    measurand("april", "Hum in April", "04", "05"),
  ],
  facilities: [
    { key: "pier", title: "Pier microphone" },
    { key: "tower", title: "Tower" },
  ],
  teams: [{ key: "bank", title: "Bank team" }],
  hypotheses: [
    {
      key: "cables",
      title: "The cables sing",
      team: "bank",
      predictions: [
        { measurand: "march", expected: 110, tolerance: { family: "normal", sd: 5 } },
        { measurand: "april", expected: 110, tolerance: { family: "normal", sd: 5 } },
      ],
    },
    {
      key: "railing",
      title: "The railing whistles",
      predictions: [{ measurand: "march", expected: 140, tolerance: { family: "normal", sd: 5 } }],
    },
  ],
  measurements: [],
};

async function call(page: Page, procedure: string, input: object): Promise<void> {
  const answer = await page.request.post(`/api/trpc/${procedure}`, { data: { json: input } });
  expect(answer.ok(), await answer.text()).toBe(true);
}

/** The campaign, with the person as its coordinator and in its one team. */
export async function importHum(person: Person): Promise<string> {
  const key = `bridge-${Date.now()}`;
  await call(person.page, "campaigns.import", { text: JSON.stringify(document), key });
  await call(person.page, "members.add", {
    key,
    email: person.email,
    role: "coordinator",
    team: "bank",
  });
  return `/campaigns/${key}`;
}

/** Puts a text into the page's file field, as if it had been chosen. */
export async function bringTable(page: Page, name: string, text: string): Promise<void> {
  await page
    .locator('input[type="file"]')
    .setInputFiles({ name, mimeType: "text/plain", buffer: Buffer.from(text) });
}
