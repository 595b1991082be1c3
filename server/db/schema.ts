/**
 * All tables; columns are the fields' names in snake_case. `npm run db:generate` turns a change here into a migration; triggers are in migrations of their own.
 * Values that are written once and read whole (scenario, figures, events) are `json`, not `jsonb`: the text is kept as it came.
 */
import { sql } from "drizzle-orm";
import {
  bigint,
  bigserial,
  check,
  customType,
  doublePrecision,
  foreignKey,
  index,
  integer,
  json,
  pgTable,
  primaryKey,
  text,
  timestamp,
  unique,
  uniqueIndex,
  uuid,
  varchar,
} from "drizzle-orm/pg-core";
import type { VerdictLine } from "#shared/api/common.ts";
import type { Role } from "#shared/api/permissions.ts";
import type { PictureType } from "#shared/api/pictures.ts";
import type { PlantKind, RoundSummary } from "#shared/api/scenarios.ts";
import type { ActivityKind } from "#shared/api/teams.ts";
import type { LogSummary } from "#shared/reception/log-summary.ts";
import type { ColumnMapping, LinkTrace, ReadReport } from "#shared/reception/types.ts";
import type { Scenario } from "#shared/scenario/schema.ts";
import type { Figures, LimitVerdict, RunEvent, RunResult } from "#shared/simulation/result.ts";

const bytea = customType<{ data: Buffer }>({ dataType: () => "bytea" });
const id = () => uuid().primaryKey().defaultRandom();
const instant = () => timestamp({ withTimezone: true, precision: 3 });
/** Which of two came later when their times are the same. */
const position = () => bigserial({ mode: "number" });
const now = () => instant().notNull().defaultNow();

export const users = pgTable(
  "users",
  {
    id: id(),
    email: text().notNull(),
    name: text().notNull(),
    passwordHash: text().notNull(),
    createdAt: now(),
  },
  (table) => [uniqueIndex("users_email_unique").on(sql`lower(${table.email})`)],
);

export const teams = pgTable("teams", { id: id(), name: text().notNull(), createdAt: now() });

export const memberships = pgTable(
  "memberships",
  {
    teamId: uuid()
      .notNull()
      .references(() => teams.id, { onDelete: "cascade" }),
    userId: uuid()
      .notNull()
      .references(() => users.id, { onDelete: "cascade" }),
    roles: text().array().notNull().$type<Role[]>(),
  },
  (table) => [
    primaryKey({ columns: [table.teamId, table.userId] }),
    index("memberships_user").on(table.userId),
    check(
      "memberships_roles_known",
      sql`cardinality(${table.roles}) > 0 and ${table.roles} <@ array['trainee', 'engineer', 'reviewer', 'administrator']::text[]`,
    ),
  ],
);

/** The table's line of a scenario: what it shows and sorts by is kept here, taken from the latest revision and its latest run. */
export const scenarios = pgTable(
  "scenarios",
  {
    id: id(),
    teamId: uuid()
      .notNull()
      .references(() => teams.id, { onDelete: "cascade" }),
    ownerId: uuid()
      .notNull()
      .references(() => users.id),
    latestRevision: integer().notNull(),
    name: text().notNull(),
    /** Lower-case, numbers padded: "rig 2" before "rig 10", whatever the database's own collation. */
    sortKey: text().notNull(),
    searchText: text().notNull(),
    plantKind: text().notNull().$type<PlantKind>(),
    periodS: doublePrecision().notNull(),
    round: json().notNull().$type<RoundSummary>(),
    /** SUMMARY_VERSION that made the columns from name to round; an older one is made anew at the next start. */
    summaryVersion: integer().notNull().default(0),
    verdict: text().notNull().$type<VerdictLine["state"]>(),
    verdictWord: text().notNull(),
    verdictSentence: text().notNull(),
    latestRunId: uuid(),
    sent: integer(),
    lost: integer(),
    createdAt: now(),
    changedAt: now(),
    archivedAt: instant(),
  },
  (table) => [index("scenarios_team_changed").on(table.teamId, table.changedAt, table.id)],
);

/** Written once. A trigger refuses changes, and deletion other than together with the whole scenario. */
export const revisions = pgTable(
  "revisions",
  {
    id: id(),
    scenarioId: uuid()
      .notNull()
      .references(() => scenarios.id, { onDelete: "cascade" }),
    number: integer().notNull(),
    name: text().notNull(),
    note: text().notNull(),
    scenario: json().notNull().$type<Scenario>(),
    /** What stands for a verdict until there is a run: the scenario does not fit, or has not been run yet. */
    unrun: json().notNull().$type<VerdictLine>(),
    authorId: uuid()
      .notNull()
      .references(() => users.id),
    savedAt: now(),
  },
  (table) => [unique("revisions_scenario_number").on(table.scenarioId, table.number), check("revisions_number_positive", sql`${table.number} > 0`)],
);

/** Written once, like revisions: what a run says cannot be altered afterwards. */
export const runs = pgTable(
  "runs",
  {
    id: id(),
    scenarioId: uuid().notNull(),
    revision: integer().notNull(),
    seed: bigint({ mode: "number" }).notNull(),
    engine: text().notNull(),
    verdict: text().notNull().$type<VerdictLine["state"]>(),
    verdictWord: text().notNull(),
    verdictSentence: text().notNull(),
    ended: text().notNull().$type<RunResult["ended"]>(),
    endedAtS: doublePrecision().notNull(),
    durationS: doublePrecision().notNull(),
    sent: integer().notNull(),
    lost: integer().notNull(),
    figures: json().notNull().$type<Figures>(),
    limits: json().notNull().$type<LimitVerdict[]>(),
    events: json().notNull().$type<RunEvent[]>(),
    digest: text().notNull(),
    points: integer().notNull(),
    keptPoints: integer().notNull(),
    keptEvery: integer().notNull(),
    compressedBytes: integer().notNull(),
    authorId: uuid()
      .notNull()
      .references(() => users.id),
    createdAt: now(),
    position: position(),
  },
  (table) => [
    unique("runs_once").on(table.scenarioId, table.revision, table.seed, table.engine),
    index("runs_newest").on(table.scenarioId, table.createdAt, table.position),
    foreignKey({ columns: [table.scenarioId, table.revision], foreignColumns: [revisions.scenarioId, revisions.number] }).onDelete("cascade"),
  ],
);

/** Apart from runs, so that lists never touch the bytes. */
export const runSeries = pgTable("run_series", {
  runId: uuid()
    .primaryKey()
    .references(() => runs.id, { onDelete: "cascade" }),
  /** gzip of the layout in shared/api/series.ts. */
  bytes: bytea().notNull(),
});

/** Of a reception log only the name ever changes: a trigger refuses the rest. */
export const receptionLogs = pgTable(
  "reception_logs",
  {
    id: id(),
    teamId: uuid()
      .notNull()
      .references(() => teams.id, { onDelete: "cascade" }),
    authorId: uuid()
      .notNull()
      .references(() => users.id),
    name: text().notNull(),
    sortKey: text().notNull(),
    searchText: text().notNull(),
    fileName: text().notNull(),
    /** Of the original file, unpacked. */
    bytes: bigint({ mode: "number" }).notNull(),
    sha256: text().notNull(),
    mapping: json().notNull().$type<ColumnMapping>(),
    /** SHA-256 over the file's and the mapping: the same file read in the same way is kept once. */
    readingKey: text().notNull(),
    rows: integer().notNull(),
    rowsUsed: integer().notNull(),
    troubles: integer().notNull(),
    links: integer().notNull(),
    packets: bigint({ mode: "number" }).notNull(),
    lost: bigint({ mode: "number" }).notNull(),
    intervalS: doublePrecision(),
    /** null: read before the verdicts were summed up. */
    verdicts: json().$type<LogSummary["verdicts"]>(),
    uploadedAt: now(),
  },
  (table) => [
    unique("reception_logs_once").on(table.teamId, table.readingKey),
    index("reception_logs_team_uploaded").on(table.teamId, table.uploadedAt),
  ],
);

/** What was read from a log, apart from it, so that lists never touch it. */
export const logReadings = pgTable("log_readings", {
  logId: uuid()
    .primaryKey()
    .references(() => receptionLogs.id, { onDelete: "cascade" }),
  report: json().notNull().$type<ReadReport>(),
  linkTraces: json().notNull().$type<LinkTrace[]>(),
});

/** The original file, gzip, in pieces that can be written and sent one by one. */
export const logPieces = pgTable(
  "log_pieces",
  {
    logId: uuid()
      .notNull()
      .references(() => receptionLogs.id, { onDelete: "cascade" }),
    number: integer().notNull(),
    bytes: bytea().notNull(),
  },
  (table) => [primaryKey({ columns: [table.logId, table.number] })],
);

/** Written once. */
export const floorPictures = pgTable(
  "floor_pictures",
  {
    id: id(),
    teamId: uuid()
      .notNull()
      .references(() => teams.id, { onDelete: "cascade" }),
    authorId: uuid()
      .notNull()
      .references(() => users.id),
    name: text().notNull(),
    type: text().notNull().$type<PictureType>(),
    widthPx: integer().notNull(),
    heightPx: integer().notNull(),
    size: integer().notNull(),
    sha256: text().notNull(),
    bytes: bytea().notNull(),
    uploadedAt: now(),
  },
  (table) => [unique("floor_pictures_once").on(table.teamId, table.sha256)],
);

/**
 * Which revision names which reception log, or shows which picture: a trigger reads it from each revision that is saved, and
 * the foreign key keeps what is named. It is checked when a transaction ends, so that a whole team can go at once.
 */
export const revisionLogs = pgTable(
  "revision_logs",
  {
    scenarioId: uuid().notNull(),
    revision: integer().notNull(),
    logId: uuid().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.scenarioId, table.revision] }),
    index("revision_logs_log").on(table.logId),
    foreignKey({ name: "revision_logs_keep_log", columns: [table.logId], foreignColumns: [receptionLogs.id] }),
    foreignKey({
      name: "revision_logs_of_revision",
      columns: [table.scenarioId, table.revision],
      foreignColumns: [revisions.scenarioId, revisions.number],
    }).onDelete("cascade"),
  ],
);
export const revisionPictures = pgTable(
  "revision_pictures",
  {
    scenarioId: uuid().notNull(),
    revision: integer().notNull(),
    pictureId: uuid().notNull(),
  },
  (table) => [
    primaryKey({ columns: [table.scenarioId, table.revision] }),
    index("revision_pictures_picture").on(table.pictureId),
    foreignKey({ name: "revision_pictures_keep_picture", columns: [table.pictureId], foreignColumns: [floorPictures.id] }),
    foreignKey({
      name: "revision_pictures_of_revision",
      columns: [table.scenarioId, table.revision],
      foreignColumns: [revisions.scenarioId, revisions.number],
    }).onDelete("cascade"),
  ],
);

/** Who did what when. Outlives what it was done to. */
export const activity = pgTable(
  "activity",
  {
    id: id(),
    teamId: uuid()
      .notNull()
      .references(() => teams.id, { onDelete: "cascade" }),
    userId: uuid()
      .notNull()
      .references(() => users.id),
    what: text().notNull().$type<ActivityKind>(),
    subjectId: uuid(),
    subjectName: text(),
    revision: integer(),
    at: now(),
    position: position(),
  },
  (table) => [index("activity_team_at").on(table.teamId, table.at, table.position), index("activity_subject").on(table.subjectId)],
);

/** The table that connect-pg-simple expects. */
export const sessions = pgTable(
  "sessions",
  {
    sid: varchar().primaryKey(),
    sess: json().notNull(),
    expire: timestamp({ withTimezone: true, precision: 6 }).notNull(),
  },
  (table) => [index("sessions_expire").on(table.expire)],
);

/** Single values of this installation: the key that signs session cookies, whether the demo team was laid out. */
export const settings = pgTable("settings", { key: text().primaryKey(), value: text().notNull() });
