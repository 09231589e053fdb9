import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { FindingWord } from '@/lib/domain/reading-result';
import type { Medium, Verdict } from '@/lib/domain/specification';

/** One fit of one frame: what was measured, with copies of what it was measured with. Never updated. */
export interface Reading extends Model<InferAttributes<Reading>, InferCreationAttributes<Reading>> {
  id: CreationOptional<number>;
  frameId: number;
  number: number;
  replacesId: number | null;
  benchId: number;
  setupId: number;
  lotId: number | null;
  unitId: number | null;
  sourceId: number | null;
  madeBy: number | null;
  madeAt: Date;
  madeInReview: boolean;
  engine: string;
  frameSha256: string;
  digest: string;
  optionsJson: string;
  setupJson: string;
  specificationJson: string | null;
  medium: Medium;
  valueNm: number | null;
  uNm: number | null;
  expandedNm: number | null;
  k: number | null;
  dof: number | null;
  wavelengthAirNm: number | null;
  wavelengthVacuumNm: number | null;
  verdict: Verdict | null;
  judgementJson: string | null;
  word: FindingWord;
  wordText: string;
  orderCentres: number;
  /** px of a frame; null for a scan, which has them in mm. */
  spacingPx: CreationOptional<number | null>;
  uSpacingPx: CreationOptional<number | null>;
  scaleUmPerPx: CreationOptional<number | null>;
  zeroAlongPx: CreationOptional<number | null>;
  spacingMm: CreationOptional<number | null>;
  uSpacingMm: CreationOptional<number | null>;
  zeroMm: CreationOptional<number | null>;
}

export function defineReading(sequelize: Sequelize) {
  return sequelize.define<Reading>(
    'Reading',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      frameId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      number: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      replacesId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      benchId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      setupId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      lotId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      unitId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      sourceId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      madeBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      madeAt: { type: DataTypes.DATE(3), allowNull: false },
      madeInReview: { type: DataTypes.BOOLEAN, allowNull: false },
      engine: { type: DataTypes.STRING(40), allowNull: false },
      frameSha256: { type: DataTypes.STRING(64), allowNull: false },
      digest: { type: DataTypes.STRING(64), allowNull: false },
      optionsJson: { type: DataTypes.TEXT('long'), allowNull: false },
      setupJson: { type: DataTypes.TEXT('long'), allowNull: false },
      specificationJson: { type: DataTypes.TEXT('long'), allowNull: true },
      medium: { type: DataTypes.STRING(10), allowNull: false },
      valueNm: { type: DataTypes.DOUBLE, allowNull: true },
      uNm: { type: DataTypes.DOUBLE, allowNull: true },
      expandedNm: { type: DataTypes.DOUBLE, allowNull: true },
      k: { type: DataTypes.DOUBLE, allowNull: true },
      dof: { type: DataTypes.DOUBLE, allowNull: true },
      wavelengthAirNm: { type: DataTypes.DOUBLE, allowNull: true },
      wavelengthVacuumNm: { type: DataTypes.DOUBLE, allowNull: true },
      verdict: { type: DataTypes.STRING(12), allowNull: true },
      judgementJson: { type: DataTypes.TEXT('long'), allowNull: true },
      word: { type: DataTypes.STRING(8), allowNull: false },
      wordText: { type: DataTypes.STRING(1000), allowNull: false },
      orderCentres: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      spacingPx: { type: DataTypes.DOUBLE, allowNull: true },
      uSpacingPx: { type: DataTypes.DOUBLE, allowNull: true },
      scaleUmPerPx: { type: DataTypes.DOUBLE, allowNull: true },
      zeroAlongPx: { type: DataTypes.DOUBLE, allowNull: true },
      spacingMm: { type: DataTypes.DOUBLE, allowNull: true },
      uSpacingMm: { type: DataTypes.DOUBLE, allowNull: true },
      zeroMm: { type: DataTypes.DOUBLE, allowNull: true },
    },
    { tableName: 'readings', modelName: 'Reading' },
  );
}
