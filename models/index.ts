import type { Sequelize } from 'sequelize';
import { defineAuditHead } from './audit-head';
import { defineAuditRow } from './audit-row';
import { defineBandStack } from './band-stack';
import { defineBench } from './bench';
import { defineCondition } from './condition';
import { defineFrame } from './frame';
import { defineLookAnswer } from './look-answer';
import { defineLot } from './lot';
import { defineOutboxMail } from './outbox-mail';
import { definePasswordReset } from './password-reset';
import { definePerson } from './person';
import { definePersonRole } from './person-role';
import { defineReading } from './reading';
import { defineReadingResult } from './reading-result';
import { defineReadingState } from './reading-state';
import { defineReadingValue } from './reading-value';
import {
  defineBenchRelease,
  defineBenchRule,
  defineBenchStop,
  defineReferenceCheck,
} from './reference-check';
import { defineReturn } from './return';
import { defineSetting } from './setting';
import { defineSetup } from './setup';
import { defineSignInAttempt } from './sign-in-attempt';
import { defineSignature } from './signature';
import { defineSource } from './source';
import { defineSpecification } from './specification';
import { defineUnit } from './unit';
import { defineUnitOutcome } from './unit-outcome';

export type Tables = ReturnType<typeof defineTables>;

/** Every table of the product on one connection pool. */
export function defineTables(sequelize: Sequelize) {
  const tables = {
    auditHead: defineAuditHead(sequelize),
    auditRows: defineAuditRow(sequelize),
    benchReleases: defineBenchRelease(sequelize),
    benchRules: defineBenchRule(sequelize),
    benchStops: defineBenchStop(sequelize),
    bandStacks: defineBandStack(sequelize),
    benches: defineBench(sequelize),
    conditions: defineCondition(sequelize),
    frames: defineFrame(sequelize),
    lookAnswers: defineLookAnswer(sequelize),
    lots: defineLot(sequelize),
    outbox: defineOutboxMail(sequelize),
    passwordResets: definePasswordReset(sequelize),
    people: definePerson(sequelize),
    personRoles: definePersonRole(sequelize),
    readings: defineReading(sequelize),
    readingResults: defineReadingResult(sequelize),
    readingStates: defineReadingState(sequelize),
    readingValues: defineReadingValue(sequelize),
    referenceChecks: defineReferenceCheck(sequelize),
    returns: defineReturn(sequelize),
    settings: defineSetting(sequelize),
    setups: defineSetup(sequelize),
    signInAttempts: defineSignInAttempt(sequelize),
    signatures: defineSignature(sequelize),
    sources: defineSource(sequelize),
    specifications: defineSpecification(sequelize),
    units: defineUnit(sequelize),
    unitOutcomes: defineUnitOutcome(sequelize),
  };
  tables.people.hasMany(tables.personRoles, { foreignKey: 'personId', as: 'roleRows' });
  return tables;
}
