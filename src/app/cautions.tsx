/** In one calm sentence each; beside every verdict that somebody might act on, and at the foot of every page. */
const CAUTIONS = [
  "Simulation and analysis do not replace commissioning tests on the real machine.",
  "A control loop over radio is not a safety function: emergency stop and protective functions stay on circuits designed and assessed under the functional-safety standards that apply to the machine.",
  "Radio use follows the local spectrum rules.",
  "Local codes and the judgement of the responsible licensed engineer come first.",
] as const;

export const Cautions = () => (
  <ul className="caution" aria-label="Cautions">
    {CAUTIONS.map((caution) => (
      <li key={caution}>{caution}</li>
    ))}
  </ul>
);
