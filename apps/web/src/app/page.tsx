import { Section } from "@/look/section";
import { Time } from "@/look/time";
export default function Page() {
  return (
    <main>
      <h1>hello</h1>
      <Section title="χ² log₁₀">
        x <Time at="2031-01-01T00:00:00Z" />
      </Section>
    </main>
  );
}
