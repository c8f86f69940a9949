/**
 * Scores mutated documents of every form, and tells those that go wrong or take long.
 *
 *   npx tsx test/bench/fuzz-documents.ts FIRST COUNT [FORM ...]
 */
import { everyForm, type FormName } from "@weighhouse/campaign/testing/every-form";
import { faultOf, mutant } from "@weighhouse/engine/testing/mutations";

const [first = "1", count = "1000", ...asked] = process.argv.slice(2);
const among = asked.length > 0 ? (asked as FormName[]) : (Object.keys(everyForm()) as FormName[]);
/** Nothing may take more on a quiet core. */
const MOST_SECONDS = 10;
let scored = 0;
let faults = 0;
for (let seed = Number(first); seed < Number(first) + Number(count); seed += 1) {
  const { name, document, changes } = mutant(seed, among);
  const begin = process.cpuUsage();
  const outcome = faultOf(document);
  const { user } = process.cpuUsage(begin);
  if (outcome.scored) scored += 1;
  const seconds = user / 1e6;
  if (outcome.fault === null && seconds < MOST_SECONDS) continue;
  faults += 1;
  console.log(`${seed} ${name} ${seconds.toFixed(1)} s ${changes.join("; ")}`);
  if (outcome.fault !== null) console.log(outcome.fault);
}
console.log(`${count} documents, ${scored} scored, ${faults} faults`);
process.exitCode = faults > 0 ? 1 : 0;
