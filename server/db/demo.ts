/** The demo team: an invented company, its people and scenarios. Laid out once, on the first start. */
import type { Role } from "#shared/api/permissions.ts";
import type { Scenario } from "#shared/scenario/schema.ts";

export const DEMO_PASSWORD = "hold-fast-2026";

type TeamKey = "northquay" | "saltmarsh";
export const DEMO_TEAMS: Record<TeamKey, string> = { northquay: "Northquay Packaging", saltmarsh: "Saltmarsh Training Centre" };

const KIM = "kim.sandeval@northquay.example";
const ROWAN = "rowan.fennick@northquay.example";
const ADA = "ada.moorling@northquay.example";
const TOVE = "tove.saltby@northquay.example";

export interface DemoPerson {
  name: string;
  email: string;
  roles: Partial<Record<TeamKey, Role[]>>;
}
export const DEMO_PEOPLE: readonly DemoPerson[] = [
  { name: "Rowan Fennick", email: ROWAN, roles: { northquay: ["engineer"], saltmarsh: ["trainee"] } },
  { name: "Ada Moorling", email: ADA, roles: { northquay: ["reviewer"] } },
  { name: "Kim Sandeval", email: KIM, roles: { northquay: ["trainee"] } },
  { name: "Tove Saltby", email: TOVE, roles: { northquay: ["administrator"], saltmarsh: ["engineer"] } },
];

interface DemoRevision {
  by: string;
  hoursAgo: number;
  note: string;
  /** What was different then from the example; left out: nothing. */
  then?: (scenario: Scenario) => void;
}
export interface DemoScenario {
  team: TeamKey;
  /** File in examples/. */
  example: string;
  /** Oldest first; the first one's author owns the scenario. */
  revisions: DemoRevision[];
}

const DAY = 24;

/** In the order of their last change. */
export const DEMO_SCENARIOS: readonly DemoScenario[] = [
  {
    team: "saltmarsh",
    example: "balancer-rig-1.json",
    revisions: [
      {
        by: TOVE,
        hoursAgo: 8 * DAY,
        note: "For the first afternoon of the course",
        then: (scenario) => {
          scenario.name = "Training rig";
          scenario.description = "The balancer of the course: change the loss and see how long it holds.";
        },
      },
    ],
  },
  {
    team: "northquay",
    example: "balancer-rig-2-bursts.json",
    revisions: [
      {
        by: TOVE,
        hoursAgo: 6 * DAY + 5,
        note: "Losses as counted in hall 2, taken as independent",
        then: (scenario) => {
          scenario.losses.process = { type: "bernoulli", measurement: 0.05, command: 0.05 };
        },
      },
      { by: TOVE, hoursAgo: 6 * DAY + 3, note: "They come in bursts: the lorry at the dock door" },
    ],
  },
  {
    team: "northquay",
    example: "pallet-crane-bay-3.json",
    revisions: [
      {
        by: ADA,
        hoursAgo: 5 * DAY + 2,
        note: "Masses and lengths from the crane's drawing",
        then: (scenario) => {
          scenario.changes = [];
        },
      },
      { by: ADA, hoursAgo: 4 * DAY + 6, note: "Takes on a load in mid-travel" },
    ],
  },
  {
    team: "northquay",
    example: "balancer-rig-1-held.json",
    revisions: [{ by: ADA, hoursAgo: 3 * DAY + 1, note: "What if the drive only held the last command?" }],
  },
  {
    team: "northquay",
    example: "film-dancer-arm-1.json",
    revisions: [{ by: ROWAN, hoursAgo: 2 * DAY + 4, note: "PID as it runs on the wired machine" }],
  },
  {
    team: "northquay",
    example: "balancer-rig-1.json",
    revisions: [
      {
        by: ROWAN,
        hoursAgo: 1 * DAY + 3,
        note: "Draft for the long hall, does not fit yet",
        then: (scenario) => {
          scenario.name = "Balancer, long hall";
          scenario.description = "The same machine with eight hops between sensor and drive. The round is longer than its period.";
          scenario.round.hops = 8;
        },
      },
    ],
  },
  {
    team: "northquay",
    example: "balancer-rig-1.json",
    revisions: [
      {
        by: ROWAN,
        hoursAgo: 7 * DAY + 2,
        note: "As built; the drive holds the last command when one is lost",
        then: (scenario) => {
          scenario.loops[0].actuator.onLoss = { policy: "hold" };
          scenario.losses.outages = [];
        },
      },
      {
        by: ADA,
        hoursAgo: 3 * DAY + 3,
        note: "An outage of 100 ms, as measured at shift change",
        then: (scenario) => {
          scenario.loops[0].actuator.onLoss = { policy: "hold" };
        },
      },
      { by: ROWAN, hoursAgo: 2, note: "Every command carries a plan for the rounds after it" },
    ],
  },
];
