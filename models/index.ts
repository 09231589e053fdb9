import type { Sequelize } from 'sequelize';
import { defineAuditAnchor } from './audit-anchor';
import { defineAuditHead } from './audit-head';
import { defineAuditRow } from './audit-row';
import { defineBandStack } from './band-stack';
import { defineBench } from './bench';
import { defineCondition } from './condition';
import { defineCertificateFile } from './certificate-file';
import { defineReadingComment } from './comment';
import { defineCommentMention } from './comment-mention';
import { defineCorrectionFit } from './correction-fit';
import { defineFrame } from './frame';
import { defineLookAnswer } from './look-answer';
import { defineLot } from './lot';
import { defineMoveReason } from './move-reason';
import { defineOutboxMail } from './outbox-mail';
import { definePasswordProof } from './password-proof';
import { definePasswordReset } from './password-reset';
import { definePerson } from './person';
import { definePersonRole } from './person-role';
import { definePlate } from './plate';
import { definePlateCertificate } from './plate-certificate';
import { definePlateMount } from './plate-mount';
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
import { defineRegionTrial } from './region-trial';
import { defineReportableChoice } from './reportable-choice';
import { defineReturn } from './return';
import { defineSetting } from './setting';
import { defineSetup } from './setup';
import { defineSetupDecision } from './setup-decision';
import { defineSetupPlate } from './setup-plate';
import { defineSignInAttempt } from './sign-in-attempt';
import { defineSignature } from './signature';
import { defineSource } from './source';
import { defineSourceCertificate } from './source-certificate';
import { defineSpecification } from './specification';
import { defineUnit } from './unit';
import { defineUnitOutcome } from './unit-outcome';
import { defineWithdrawalAnswer } from './withdrawal-answer';
import { defineWithdrawalProposal } from './withdrawal-proposal';

export type Tables = ReturnType<typeof defineTables>;

/** Every table of the product on one connection pool. */
export function defineTables(sequelize: Sequelize) {
  const tables = {
    auditAnchors: defineAuditAnchor(sequelize),
    auditHead: defineAuditHead(sequelize),
    auditRows: defineAuditRow(sequelize),
    benchReleases: defineBenchRelease(sequelize),
    benchRules: defineBenchRule(sequelize),
    benchStops: defineBenchStop(sequelize),
    bandStacks: defineBandStack(sequelize),
    benches: defineBench(sequelize),
    conditions: defineCondition(sequelize),
    certificateFiles: defineCertificateFile(sequelize),
    comments: defineReadingComment(sequelize),
    commentMentions: defineCommentMention(sequelize),
    correctionFits: defineCorrectionFit(sequelize),
    frames: defineFrame(sequelize),
    lookAnswers: defineLookAnswer(sequelize),
    lots: defineLot(sequelize),
    moveReasons: defineMoveReason(sequelize),
    outbox: defineOutboxMail(sequelize),
    passwordProofs: definePasswordProof(sequelize),
    passwordResets: definePasswordReset(sequelize),
    people: definePerson(sequelize),
    personRoles: definePersonRole(sequelize),
    plates: definePlate(sequelize),
    plateCertificates: definePlateCertificate(sequelize),
    plateMounts: definePlateMount(sequelize),
    readings: defineReading(sequelize),
    readingResults: defineReadingResult(sequelize),
    readingStates: defineReadingState(sequelize),
    readingValues: defineReadingValue(sequelize),
    referenceChecks: defineReferenceCheck(sequelize),
    regionTrials: defineRegionTrial(sequelize),
    reportableChoices: defineReportableChoice(sequelize),
    returns: defineReturn(sequelize),
    settings: defineSetting(sequelize),
    setups: defineSetup(sequelize),
    setupDecisions: defineSetupDecision(sequelize),
    setupPlates: defineSetupPlate(sequelize),
    signInAttempts: defineSignInAttempt(sequelize),
    signatures: defineSignature(sequelize),
    sources: defineSource(sequelize),
    sourceCertificates: defineSourceCertificate(sequelize),
    specifications: defineSpecification(sequelize),
    units: defineUnit(sequelize),
    unitOutcomes: defineUnitOutcome(sequelize),
    withdrawalAnswers: defineWithdrawalAnswer(sequelize),
    withdrawalProposals: defineWithdrawalProposal(sequelize),
  };
  tables.people.hasMany(tables.personRoles, { foreignKey: 'personId', as: 'roleRows' });
  return tables;
}
