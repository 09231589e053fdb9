/** What the pages are given: plain data, made by lib/server/queries and drawn by app and components. */
import type { FrameState, ReadingState } from './life-cycle';
import type { BudgetRow, Finding, FindingWord, Region, SetupValues, ToneChoice } from './reading-result';
import type { ComparisonFacts } from '@/lib/quantity/comparison';
import type { LotRisk } from '@/lib/quantity/lot-risk';
import type { MonteCarlo } from '@/lib/quantity/monte-carlo';
import type { OtherValue } from './specification';
import type { PlacedStrip } from './placed-strip';
import type { FitResult, ScanRegion } from './scan-result';
import type { FirstValue } from './move';
import type { Instant, PersonRef } from './refs';
import type { Role } from './roles';
import type { ConfirmedValue, UncertaintyShape } from './setup';
import type { SourceKind } from './source';
import type { WithdrawalView } from './withdrawal';
import type { Judgement, Medium, Method, Specification, Verdict } from './specification';

export type { Instant, PersonRef };

/** The signed-in person as a page needs it. */
export interface Me extends PersonRef {
  email: string;
  roles: Role[];
}

/** ---- benches ---- */
export interface StatedValue {
  value: number;
  /** As entered; what kind of ± it is says `shape`. */
  stated: number;
  shape: UncertaintyShape;
  /** What `stated` is divided by: as entered, or what the shape asks for. */
  k: number;
  /** Degrees of freedom; null is infinite. */
  dof: number | null;
  /** stated / k */
  u: number;
  certificate: string;
  file: CertificateLink | null;
  /** Calendar date yyyy-mm-dd or null. */
  due: string | null;
}

/** A certificate in the store. */
export interface CertificateLink {
  sha256: string;
  fileName: string;
}

/** One revision of what is known of a slit plate. */
export interface PlateCertificateView {
  id: number;
  number: number;
  separationUm: StatedValue;
  widthUm: StatedValue;
  certificate: string;
  file: CertificateLink | null;
  due: string | null;
  confirmed: ConfirmedValue[];
  enteredBy: PersonRef;
  enteredAt: Instant;
}

export interface PlateView {
  id: number;
  name: string;
  note: string;
  /** Newest first; the first one counts. */
  certificates: PlateCertificateView[];
  /** Where it is now. */
  mountedOn: { bench: PersonRef; since: Instant } | null;
  /** Benches whose setup in force names it while it is off. */
  missedBy: PersonRef[];
  /** Newest first. */
  mounts: { bench: PersonRef; from: Instant; to: Instant | null }[];
}

/** What a setup states, whatever became of it. */
export interface SetupStatement {
  id: number;
  benchId: number;
  number: number;
  plate: string;
  plateId: number;
  /** Which certificate of the plate its copy comes from. */
  plateRevision: number;
  scaleUmPerPx: StatedValue;
  separationUm: StatedValue;
  widthUm: StatedValue;
  distanceMm: StatedValue;
  remountNm: { u: number; dof: number | null } | null;
  tone: ToneChoice;
  camera: { model: string; serial: string; bits: number | null };
  why: string;
  /** Values that looked odd, with the reason why they are right. */
  confirmed: ConfirmedValue[];
  enteredBy: PersonRef;
  enteredAt: Instant;
  /** What changes from the setup before, in words; '' for the first. */
  change: string;
  /** Larger than both uncertainties together. */
  changeIsLook: boolean;
  /** It corrects readings of the past. */
  corrects: boolean;
}

/** A setup that is, was or will be in force. */
export interface SetupView extends SetupStatement {
  from: Instant;
  /** null while nothing follows it. */
  to: Instant | null;
  /** null: entered before approval was asked for. */
  approved: { by: PersonRef; at: Instant; remark: string } | null;
  readings: number;
}

interface CorrectedValue {
  valueNm: number | null;
  expandedNm: number | null;
  verdict: Verdict | null;
}

/** What a setup that corrects the past does to the readings of its time. */
export interface CorrectionView {
  from: Instant;
  until: Instant | null;
  total: number;
  /** So many have been measured with the new values. */
  measured: number;
  /** So many verdicts change. */
  flips: number;
  /** So many give no answer with the new values and stay as they are. */
  withoutAnswer: number;
  /** Verdicts that change first; a page at most. */
  rows: {
    readingId: number;
    frameId: number;
    name: string;
    status: ReadingState;
    medium: Medium;
    was: CorrectedValue;
    /** null while it has not been measured, or where there is no answer. */
    becomes: CorrectedValue | null;
    message: string | null;
    flips: boolean;
  }[];
}

/** A setup that waits for a decision, or that never came into force. */
export interface SetupProposal extends SetupStatement {
  /** null: as soon as it is approved. */
  wantedFrom: Instant | null;
  /** Number of the setup it is compared with: the one in force at its moment. */
  besideNumber: number | null;
  ended: { decision: 'declined' | 'taken-back'; reason: string; by: PersonRef; at: Instant } | null;
}

/** Fit for use today? */
export interface BenchFitness {
  word: FindingWord;
  /** "due in 20 days", "overdue 3 days: take, not accept" */
  text: string;
}

export interface BenchChoice {
  id: number;
  name: string;
  setupNumber: number | null;
  fitness: BenchFitness;
  /** Number of the setup that waits for QA. */
  waitingNumber: number | null;
}

export interface BenchView extends BenchChoice {
  note: string;
  inForce: SetupView | null;
  /** Newest first by the moment they come into force, the one in force included. */
  setups: SetupView[];
  waiting: SetupProposal | null;
  /** What the waiting one would correct; null for one that corrects nothing. */
  correction: CorrectionView | null;
  /** Declined or taken back, newest first. */
  ended: SetupProposal[];
  /** The plate of the setup in force has a newer certificate than the one it took its values from. */
  newerCertificate: boolean;
  /** Highest number any setup of this bench has, 0 for none. */
  lastNumber: number;
  /** Of the newest picture taken on it; null without one. */
  pictureWidthPx: number | null;
  /** Wavelength (nm, air) to draw the geometry with: the last accepted reading's, else 635. */
  drawNm: number;
  drawnFrom: 'reading' | 'example';
}

/** ---- lots ---- */
export interface SpecificationView extends Specification {
  id: number;
  retired: boolean;
  lots: number;
}

export interface LotRow {
  id: number;
  number: string;
  supplier: string;
  specification: SpecificationView;
  units: number;
  unitsTaken: number;
  openedBy: PersonRef;
  openedAt: Instant;
  closedAt: Instant | null;
}

export interface UnitRow {
  id: number;
  serial: string;
  frames: number;
  /** The newest reading that stands (not replaced). */
  reading: ReadingBrief | null;
  outcome: { outcome: Outcome; reason: string; by: PersonRef; at: Instant } | null;
}

export interface LotView extends LotRow {
  rows: UnitRow[];
  totalRows: number;
  page: number;
  counts: Record<Verdict | 'none', number>;
  /** Risks of the decision rule for units like these; null with too few values. */
  risk: LotRisk | null;
}

export interface SourceView {
  id: number;
  name: string;
  kind: SourceKind;
  /** May a bench be checked with it? */
  isReference: boolean;
  vacuumNm: number;
  uNm: number;
  certificate: string;
  file: CertificateLink | null;
  due: string | null;
  note: string;
  /** Which of its certificates this is, from 1. */
  revision: number;
}

export const OUTCOMES = ['passed-on', 'measure-again', 'held-for-qa', 'sent-back'] as const;
export type Outcome = (typeof OUTCOMES)[number];
export const OUTCOME_WORDS: Record<Outcome, string> = {
  'passed-on': 'Passed on',
  'measure-again': 'Measure again',
  'held-for-qa': 'Held for QA',
  'sent-back': 'Sent back',
};

export const RETURN_REASONS = ['take-again', 'wrong-bench-or-lot', 'no-clean-region', 'another'] as const;
export type ReturnReason = (typeof RETURN_REASONS)[number];
export const RETURN_WORDS: Record<ReturnReason, string> = {
  'take-again': 'Take the frame again',
  'wrong-bench-or-lot': 'Wrong bench or lot',
  'no-clean-region': 'No clean region',
  another: 'Another reason',
};

/** ---- frames and readings ---- */
/** A measured length with its standard uncertainty, in px of a frame or mm of a scan. */
export interface Length {
  value: number;
  u: number;
  unit: 'px' | 'mm';
}

export interface ReadingBrief {
  id: number;
  /** Number of the reading within its frame, from 1. */
  number: number;
  status: ReadingState;
  version: number;
  /** In the specification's medium (air for a reference source). */
  wavelengthNm: number | null;
  uNm: number | null;
  expandedNm: number | null;
  k: number | null;
  medium: Medium;
  judgement: Judgement | null;
  word: FindingWord;
  /** The gravest finding's message, or the calm sentence. */
  wordText: string;
  orderCentres: number;
  spacing: Length;
  strip: PlacedStrip;
  madeBy: PersonRef | null;
  madeAt: Instant;
  /** Number of the reading that corrects this signed one; null for none. */
  correctedBy: number | null;
}

export type Subject =
  | { kind: 'unit'; unitId: number; serial: string; lotId: number; lot: string; specification: Specification }
  | { kind: 'source'; sourceId: number; name: string; vacuumNm: number; uNm: number; isReference: boolean }
  | { kind: 'none' };

export interface FrameRow {
  id: number;
  fileName: string;
  bytes: number;
  sha256: string;
  state: FrameState;
  code: string | null;
  message: string | null;
  receivedAt: Instant;
  uploadedBy: PersonRef;
  bench: PersonRef;
  setupNumber: number;
  subject: Subject;
  /** Only for a line scan: width of its detector, null for a point. */
  scan: { detectorMm: number | null } | null;
  reading: ReadingBrief | null;
  /** Why its reading came back. */
  returned: { reason: ReturnReason; words: string } | null;
}

export interface FramesQuery {
  /** A frame state or a reading state; '' is all. */
  state: '' | FrameState | ReadingState;
  /** Serial, lot or file name contains. */
  find: string;
  benchId: number | null;
  lotId: number | null;
  /** Days back; 0 is all. */
  days: number;
  mine: boolean;
  page: number;
}

export interface FramesPage {
  rows: FrameRow[];
  /** Counts for every state under the other filters. */
  counts: Record<string, number>;
  total: number;
  toReview: number;
  page: number;
  pages: number;
}

export interface SignatureView {
  personName: string;
  role: Role;
  meaning: string;
  at: Instant;
  /** When the password was typed; null: as it was signed. */
  passwordAt: Instant | null;
  digest: string;
}

export interface ReadingView extends ReadingBrief {
  result: FitResult;
  dof: number | null;
  /** All rows of the value as it is judged. */
  budget: BudgetRow[];
  /** What was done to the value beside the change of medium. */
  corrections: string[];
  method: Method;
  /** The same by the other method. */
  other: OtherValue | null;
  /** What the air and the unit were when this fit was made; empty where nothing was entered. */
  conditions: Pick<SetupValues, 'air' | 'sourceTemperature'>;
  /** The budget drawn by Monte Carlo; null where there is no budget. */
  monteCarlo: MonteCarlo | null;
  findings: Finding[];
  setup: SetupView;
  replaces: number | null;
  replacedBy: number | null;
  sentBy: PersonRef | null;
  sentAt: Instant | null;
  /** What the technician wrote when sending it; '' for nothing. */
  note: string;
  returned: { reason: ReturnReason; words: string; by: PersonRef; at: Instant } | null;
  signature: SignatureView | null;
  /** What the frame's first fit gave. */
  first: FirstValue | null;
  /** The newest question whether to withdraw it. */
  withdrawal: WithdrawalView | null;
  /** Why the value was moved from it. */
  moveReason: { words: string; by: PersonRef; at: Instant } | null;
  zeroShift: number;
  leaveOut: number[];
  tone: ToneChoice;
}

export interface FrameView extends FrameRow {
  widthPx: number | null;
  heightPx: number | null;
  /** Length of a scan, where the file gives one. */
  scanLength: (ScanRegion & { points: number }) | null;
  /** Every reading of this frame, newest first. */
  readings: ReadingBrief[];
  /** The reading shown: the asked one or the newest. */
  shown: ReadingView | null;
  /** What a fit of this frame is made with. */
  facts: FitFacts;
  outcome: UnitRow['outcome'];
}

/** What the signed-in person may do with the shown reading, decided on the server. */
export interface May {
  fit: boolean;
  send: boolean;
  accept: boolean;
  return: boolean;
  outcome: boolean;
  /** Ask for a withdrawal, or answer one. */
  withdraw: boolean;
  /** Sentence why accept is not open to this person; null when it is. */
  acceptBarred: string | null;
}

export interface ReviewView {
  frame: FrameView;
  may: May;
  queue: {
    at: number;
    of: number;
    previousId: number | null;
    nextId: number | null;
    /** The next reading's frame, to load it before it is asked for. */
    nextFrameId: number | null;
    /** Why it stands where it stands, where nothing else on the page says so. */
    because: string | null;
  };
  /** Until when a password typed before still signs; null: it must be typed. */
  passwordUntil: Instant | null;
}

/** What a fit of a frame needs beside its bytes: the setup it was received under and what it is judged by. */
export interface FitFacts {
  setup: SetupValues;
  tone: ToneChoice;
  specification: Specification | null;
  /** Only of a unit: what its value may be compared with. */
  comparison?: ComparisonFacts | null;
}

/** A fit that is shown and not kept. */
export interface FitPreview {
  result: FitResult;
  wavelengthNm: number | null;
  uNm: number | null;
  expandedNm: number | null;
  k: number | null;
  dof: number | null;
  medium: Medium;
  /** All rows of the value as it is judged. */
  budget: BudgetRow[];
  corrections: string[];
  method: Method;
  other: OtherValue | null;
  judgement: Judgement | null;
}

/** The same made by the server, with the hash of the band stack it was measured from; null for a scan. */
export interface ServerFit extends FitPreview {
  stackSha256: string | null;
}

/** The digits a person saw before keeping a fit, for the server to compare with its own. */
export interface SeenDigits {
  spacingPx: number;
  uSpacingPx: number;
  wavelengthNm: number | null;
  expandedNm: number | null;
}

/** ---- over time ---- */
export interface ChartPoint {
  readingId: number;
  frameId: number;
  label: string;
  takenAt: Instant;
  acceptedAt: Instant;
  valueNm: number;
  uNm: number | null;
  setupId: number;
  setupNumber: number;
  /** Moving range to the point before in the same stretch; null for its first. */
  movingRangeNm: number | null;
  outside: boolean;
}

export interface ChartStretch {
  setupId: number;
  setupNumber: number;
  from: Instant;
  change: string;
  /** Index of the first and last point of the stretch. */
  first: number;
  last: number;
  points: number;
  meanNm: number;
  /** null with fewer than 2 points. */
  lowerNm: number | null;
  upperNm: number | null;
  meanRangeNm: number | null;
  upperRangeNm: number | null;
  /** 'none' under 2, 'provisional' under 30, else 'firm'. */
  standing: 'none' | 'provisional' | 'firm';
}

export interface ChartFinding {
  letter: string;
  kind: 'outside' | 'range' | 'nine';
  first: number;
  last: number;
  title: string;
  text: string;
}

/** An accepted reading that was withdrawn: told beside the chart, in no mean and no limit. */
export interface WithdrawnPoint {
  readingId: number;
  frameId: number;
  label: string;
  takenAt: Instant;
  acceptedAt: Instant;
  withdrawnAt: Instant;
  valueNm: number;
  uNm: number | null;
  setupNumber: number;
  reason: string;
}

export interface OverTimeView {
  bench: PersonRef | null;
  medium: Medium;
  subjectName: string;
  /** Reference value in the shown medium, or the nominal of the lot. */
  referenceNm: number | null;
  referenceIsNominal: boolean;
  points: ChartPoint[];
  withdrawn: WithdrawnPoint[];
  stretches: ChartStretch[];
  findings: ChartFinding[];
  /** Choices for the picker. */
  choices: { value: string; label: string; points: number }[];
  chosen: string;
  benches: { bench: PersonRef; runs: number; differenceNm: number; expandedNm: number | null }[];
}

/** ---- people and log ---- */
export interface PersonRow extends Me {
  active: boolean;
  /** The last moment they may sign in; null: without end. */
  accessUntil: Instant | null;
  lastSignInAt: Instant | null;
  createdAt: Instant;
}

export interface LogRow {
  id: number;
  at: Instant;
  who: string;
  action: string;
  subject: string;
  subjectHref: string | null;
  before: unknown;
  after: unknown;
  hash: string;
}

export interface LogPage {
  rows: LogRow[];
  total: number;
  page: number;
  pages: number;
  actions: string[];
}

/** The change of region a person previews. */
export interface RegionChange {
  region: Region | ScanRegion;
  leaveOut: number[];
  zeroShift: number;
  /** Of a scan: width of its detector, null for a point; absent: as it was. */
  detectorMm?: number | null;
}
