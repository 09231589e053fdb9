import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { Method } from '@/lib/domain/specification';

/** What one accepted reading of a reference says about its bench; wavelengths in air. Never updated. */
export interface ReferenceCheckRow extends Model<
  InferAttributes<ReferenceCheckRow>,
  InferCreationAttributes<ReferenceCheckRow>
> {
  id: CreationOptional<number>;
  benchId: number;
  setupId: number;
  sourceId: number;
  readingId: number;
  publishedNm: number;
  uPublishedNm: number;
  measuredNm: number;
  uMeasuredNm: number;
  deviationNm: number;
  expandedNm: number;
  limitNm: number;
  ownLimit: boolean;
  inside: boolean;
  madeAt: Date;
}

const id = () => ({
  type: DataTypes.INTEGER.UNSIGNED,
  allowNull: false,
  autoIncrement: true,
  primaryKey: true,
});
const reference = () => ({ type: DataTypes.INTEGER.UNSIGNED, allowNull: false });
const number = () => ({ type: DataTypes.DOUBLE, allowNull: false });
const instant = () => ({ type: DataTypes.DATE(3), allowNull: false });

export function defineReferenceCheck(sequelize: Sequelize) {
  return sequelize.define<ReferenceCheckRow>(
    'ReferenceCheck',
    {
      id: id(),
      benchId: reference(),
      setupId: reference(),
      sourceId: reference(),
      readingId: reference(),
      publishedNm: number(),
      uPublishedNm: number(),
      measuredNm: number(),
      uMeasuredNm: number(),
      deviationNm: number(),
      expandedNm: number(),
      limitNm: number(),
      ownLimit: { type: DataTypes.BOOLEAN, allowNull: false },
      inside: { type: DataTypes.BOOLEAN, allowNull: false },
      madeAt: instant(),
    },
    { tableName: 'reference_checks', modelName: 'ReferenceCheck' },
  );
}

/** A bench stopped for accepting, by the check that did it. Never updated. */
export interface BenchStopRow extends Model<
  InferAttributes<BenchStopRow>,
  InferCreationAttributes<BenchStopRow>
> {
  id: CreationOptional<number>;
  benchId: number;
  checkId: number;
  stoppedAt: Date;
}

export function defineBenchStop(sequelize: Sequelize) {
  return sequelize.define<BenchStopRow>(
    'BenchStop',
    { id: id(), benchId: reference(), checkId: reference(), stoppedAt: instant() },
    { tableName: 'bench_stops', modelName: 'BenchStop' },
  );
}

/** The release of a stop, with the newest check it knew of. Never updated. */
export interface BenchReleaseRow extends Model<
  InferAttributes<BenchReleaseRow>,
  InferCreationAttributes<BenchReleaseRow>
> {
  stopId: number;
  afterCheckId: number;
  reason: string;
  releasedBy: number;
  releasedAt: Date;
}

export function defineBenchRelease(sequelize: Sequelize) {
  return sequelize.define<BenchReleaseRow>(
    'BenchRelease',
    {
      stopId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      afterCheckId: reference(),
      reason: { type: DataTypes.STRING(1000), allowNull: false },
      releasedBy: reference(),
      releasedAt: instant(),
    },
    { tableName: 'bench_releases', modelName: 'BenchRelease' },
  );
}

/** How a bench is checked and used, from then on. Never updated; the newest counts. */
export interface BenchRuleRow extends Model<
  InferAttributes<BenchRuleRow>,
  InferCreationAttributes<BenchRuleRow>
> {
  id: CreationOptional<number>;
  benchId: number;
  /** Largest deviation of a check; null: U of both. */
  limitNm: number | null;
  method: Method;
  why: string;
  enteredBy: number;
  enteredAt: Date;
}

export function defineBenchRule(sequelize: Sequelize) {
  return sequelize.define<BenchRuleRow>(
    'BenchRule',
    {
      id: id(),
      benchId: reference(),
      limitNm: { type: DataTypes.DOUBLE, allowNull: true },
      method: { type: DataTypes.STRING(12), allowNull: false },
      why: { type: DataTypes.STRING(1000), allowNull: false },
      enteredBy: reference(),
      enteredAt: instant(),
    },
    { tableName: 'bench_rules', modelName: 'BenchRule' },
  );
}
