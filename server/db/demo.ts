/** The demo team: an invented company, its people, reception logs and scenarios. Each part is laid out once, on the first start that knows it. */
import type { Role } from "#shared/api/permissions.ts";
import { type ColumnMapping, type LinkTrace, linkName } from "#shared/reception/types.ts";
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

/** A reception log as it was laid out. */
export interface LaidOutLog {
  id: string;
  name: string;
  links: LinkTrace[];
}

interface DemoRevision {
  by: string;
  hoursAgo: number;
  note: string;
  /** What was different then from the example; left out: nothing. `log` gives a log of this part by its file. */
  then?: (scenario: Scenario, log: (file: string) => LaidOutLog) => void;
}
export interface DemoScenario {
  team: TeamKey;
  /** File in examples/. */
  example: string;
  /** Oldest first; the first one's author owns the scenario. */
  revisions: DemoRevision[];
}
export interface DemoLog {
  team: TeamKey;
  /** File in examples/logs/. */
  file: string;
  name: string;
  mapping: Partial<ColumnMapping>;
  by: string;
  hoursAgo: number;
}
interface DemoPart {
  /** In the database's settings, with the time when it was laid out. */
  key: string;
  logs: DemoLog[];
  /** In the order of their last change. */
  scenarios: DemoScenario[];
}

const DAY = 24;

const SCENARIOS: DemoScenario[] = [
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

/** The numbered links of a log, one packet a round. */
function replay({ id, name, links }: LaidOutLog, measurement: number, command: number): Scenario["losses"]["process"] {
  const link = (index: number) => ({ link: linkName(links[index]), runs: links[index].runs });
  return { type: "replay", log: { id, name }, measurement: link(measurement), command: link(command), then: "repeat" };
}

const QUIET = "quiet-shift.csv";
const PRESS = "press-running.csv";
const LOGS: DemoLog[] = [
  {
    team: "northquay",
    file: QUIET,
    name: "Hall 2, quiet shift",
    mapping: {
      number: { column: "round", kind: "round", wrapsAt: null },
      time: { column: "t_ms", unit: "ms" },
      source: "source",
      receiver: "receiver",
      received: "ok",
      rssi: "rssi_dbm",
    },
    by: ROWAN,
    hoursAgo: 2 * DAY + 7,
  },
  {
    team: "northquay",
    file: PRESS,
    name: "Hall 2, press running",
    mapping: {
      number: { column: "seq", kind: "sequence", wrapsAt: null },
      time: { column: "time", unit: "iso" },
      source: "src",
      receiver: "dst",
      rssi: "rssi",
    },
    by: TOVE,
    hoursAgo: 1 * DAY + 6,
  },
];

const ON_THE_FLOOR: DemoScenario[] = [
  {
    team: "northquay",
    example: "balancer-rig-2-bursts.json",
    revisions: [
      {
        by: TOVE,
        hoursAgo: 2 * DAY + 5,
        note: "What nodes 7 and 4 received on a quiet shift, packet by packet",
        then: (scenario, log) => {
          scenario.name = "Balancer rig 2, as recorded";
          scenario.description = "Rig 2 under what was received in hall 2. Revision 1 replays a quiet shift, revision 2 one with the press running.";
          scenario.losses.process = replay(log(QUIET), 0, 1);
        },
      },
      {
        by: TOVE,
        hoursAgo: 1 * DAY + 5,
        note: "The same with the press running: both messages lost where node 1 lost node 5",
        then: (scenario, log) => {
          scenario.name = "Balancer rig 2, as recorded";
          scenario.description = "Rig 2 under what was received in hall 2. Revision 1 replays a quiet shift, revision 2 one with the press running.";
          scenario.losses.process = replay(log(PRESS), 0, 0);
        },
      },
    ],
  },
  {
    team: "northquay",
    example: "film-line-2-shared-round.json",
    revisions: [{ by: ADA, hoursAgo: 22, note: "Ratios between the eight nodes as counted on Monday" }],
  },
  {
    team: "northquay",
    example: "balancer-rig-1-floor.json",
    revisions: [{ by: ROWAN, hoursAgo: 3, note: "Nodes as they hang on the pillars; the truck keeps to its lane" }],
  },
];

export const DEMO_PARTS: readonly DemoPart[] = [
  { key: "demo", logs: [], scenarios: SCENARIOS },
  { key: "demo-floor", logs: LOGS, scenarios: ON_THE_FLOOR },
];
