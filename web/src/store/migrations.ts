// Numbered changes to stored records. A number is never used again and a step never edited once it is released:
// records written by it are out there. Each has a fixture of the version before it in tests/fixtures/store/.
// What a job *says* is migrated by the core; this is only about how records are kept.

import { StoreError, type Envelope, type Job, type MigrationStep } from "./types";

/** The version that this app writes. */
export const RECORD_SCHEMA = 1;

/** Version of the database layout; it only ever adds stores and indexes. */
export const DATABASE_VERSION = 1;

export const MIGRATIONS: readonly MigrationStep[] = [];

/** The payload as this app knows it. The record itself is left as it is. */
export function migratePayload(
  envelope: Envelope<Job>,
  schema: number = RECORD_SCHEMA,
  steps: readonly MigrationStep[] = MIGRATIONS,
): Job {
  let payload = envelope.payload;
  for (let version = envelope.schema + 1; version <= schema; version++) {
    const step = steps.find((candidate) => candidate.to === version);
    if (step === undefined) throw new StoreError("damaged", `There is no way from record version ${version - 1} to ${version}.`);
    payload = step.migrate(payload);
  }
  return payload;
}
