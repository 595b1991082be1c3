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
  /** What was different then; left out: the scenario as it is. */
  before?: (scenario: Scenario) => Scenario;
}
export interface DemoScenario {
  team: TeamKey;
  scenario: Scenario;
  /** Oldest first; the first one's author owns the scenario. */
  revisions: DemoRevision[];
}

const template = (key: string): Scenario => {
  const found = TEMPLATES.find((entry) => entry.key === key);
  if (!found) throw new Error(`There is no template "${key}".`);
  return found.scenario;
};

export const demoScenarios = (): DemoScenario[] => [
  {
    team: "northquay",
    scenario: template("pendulum-on-cart"),
    revisions: [{ by: ROWAN, hoursAgo: 3, note: "First set-up" }],
  },
  {
    team: "saltmarsh",
    scenario: template("overhead-crane"),
    revisions: [{ by: TOVE, hoursAgo: 5, note: "First set-up" }],
  },
];
