/** The demo team: an invented company, its people and scenarios. Laid out once, on the first start. */
import type { Role } from "#shared/api/permissions.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import { TEMPLATES } from "#shared/scenario/templates.ts";

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
  /** What this revision changes in the one before it. */
  change?: (scenario: Scenario) => void;
}
export interface DemoScenario {
  team: TeamKey;
  from: "pendulum-on-cart" | "overhead-crane";
  /** Oldest first; the first one's author owns the scenario. */
  revisions: DemoRevision[];
}

export function startOf({ from }: DemoScenario): Scenario {
  const template = TEMPLATES.find(({ key }) => key === from);
  if (!template) throw new Error(`There is no template "${from}".`);
  return structuredClone(template.scenario);
}

const DAY = 24;
const outage = (seconds: number) => (scenario: Scenario) => {
  scenario.losses.outages = [{ fromS: 6.5, untilS: 6.5 + seconds, messages: ["measurement", "command"], lossProbability: 1 }];
};

export const DEMO_SCENARIOS: readonly DemoScenario[] = [
  {
    // A burst of loss brings the rod down in the first revision; nothing has been done about it yet.
    team: "northquay",
    from: "pendulum-on-cart",
    revisions: [
      {
        by: TOVE,
        hoursAgo: 6 * DAY + 5,
        note: "Rig 2 stands beside the shrink tunnel, losses come in bursts",
        change: (scenario) => {
          scenario.name = "Balancer rig 2, beside the shrink tunnel";
          scenario.description = "The same machine as rig 1. The tunnel's drive disturbs the channel: rounds are lost in bursts of seven on average.";
          scenario.run.seed = 2;
          scenario.losses.outages = [];
          scenario.losses.process = {
            type: "gilbert-elliott-shared",
            channel: { goodToBad: 0.02, badToGood: 0.15, lossInGood: 0, lossInBad: 1 },
          };
        },
      },
    ],
  },
  {
    // Everything holds but the time to settle.
    team: "northquay",
    from: "overhead-crane",
    revisions: [
      {
        by: ADA,
        hoursAgo: 4 * DAY + 2,
        note: "Masses and lengths from the crane's drawing",
        change: (scenario) => {
          scenario.name = "Carton crane, bay 3";
          scenario.description = "Moves a pallet of cartons by 2.5 m without swing; the trolley's drive listens to the network.";
          scenario.limits = scenario.limits.map((limit) => (limit.type === "settle" ? { ...limit, withinS: 7 } : limit));
        },
      },
      {
        by: ROWAN,
        hoursAgo: 1 * DAY + 7,
        note: "The packing line waits no longer than 5 s",
        change: (scenario) => {
          scenario.limits = scenario.limits.map((limit) => (limit.type === "settle" ? { ...limit, withinS: 5 } : limit));
        },
      },
    ],
  },
  {
    // A draft: more hops than the round has room for.
    team: "northquay",
    from: "pendulum-on-cart",
    revisions: [
      {
        by: ROWAN,
        hoursAgo: 2 * DAY,
        note: "Draft for the long hall, does not fit yet",
        change: (scenario) => {
          scenario.name = "Balancer, long hall";
          scenario.round.hops = 8;
        },
      },
    ],
  },
  {
    // Found wanting, changed, and it holds.
    team: "northquay",
    from: "pendulum-on-cart",
    revisions: [
      {
        by: ROWAN,
        hoursAgo: 5 * DAY + 1,
        note: "As built; the drive keeps the last command when one is lost",
        change: (scenario) => {
          scenario.name = "Balancer rig 1";
          scenario.loops[0].actuator.onLoss = { policy: "hold" };
        },
      },
      { by: ADA, hoursAgo: 3 * DAY + 3, note: "An outage of 300 ms has to be survived, as measured at shift change", change: outage(0.3) },
      {
        by: ROWAN,
        hoursAgo: 2,
        note: "Every command carries a plan for the five rounds after it",
        change: (scenario) => {
          scenario.loops[0].actuator.onLoss = { policy: "plan", length: 6, end: "zero" };
        },
      },
    ],
  },
  {
    team: "saltmarsh",
    from: "pendulum-on-cart",
    revisions: [
      {
        by: TOVE,
        hoursAgo: 8 * DAY,
        note: "For the first afternoon of the course",
        change: (scenario) => {
          scenario.name = "Training rig";
        },
      },
    ],
  },
];
