import type { RoundTiming } from "#shared/network/round.ts";
import { AboutSection } from "./about-section.tsx";
import { LimitsSection } from "./limits-section.tsx";
import { LoopSection } from "./loop-section.tsx";
import { LossesSection } from "./losses-section.tsx";
import { MachineSection } from "./machine-section.tsx";
import { PushesSection } from "./pushes-section.tsx";
import { RadioSection } from "./radio-section.tsx";
import { ReferenceSection } from "./reference-section.tsx";
import { RoundSection } from "./round-section.tsx";
import { RunSection } from "./run-section.tsx";
import { StartSection } from "./start-section.tsx";

/** Everything that the scenario says, in sections that fold. */
export function Setup({ timing }: { timing: RoundTiming | null }) {
  return (
    <section className="setup" id="setup" aria-label="Set-up">
      <MachineSection />
      <LoopSection timing={timing} />
      <LossesSection />
      <RadioSection timing={timing} />
      <RoundSection timing={timing} />
      <ReferenceSection />
      <PushesSection />
      <LimitsSection />
      <StartSection />
      <RunSection />
      <AboutSection />
    </section>
  );
}
