import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { FrameState } from '@/lib/domain/life-cycle';

/** One picture or line scan as received. Its bytes lie in the store under their SHA-256. */
export interface Frame extends Model<InferAttributes<Frame>, InferCreationAttributes<Frame>> {
  id: CreationOptional<number>;
  benchId: number;
  setupId: number;
  lotId: number | null;
  unitId: number | null;
  sourceId: number | null;
  fileName: string;
  findText: string;
  bytes: number;
  sha256: string;
  mediaType: string;
  sameKey: string | null;
  state: FrameState;
  code: CreationOptional<string | null>;
  message: CreationOptional<string | null>;
  widthPx: CreationOptional<number | null>;
  heightPx: CreationOptional<number | null>;
  /** Of a scan: width of its detector (null: a point) as its newest reading has it, first and last position. */
  detectorMm: CreationOptional<number | null>;
  scanFromMm: CreationOptional<number | null>;
  scanToMm: CreationOptional<number | null>;
  scanPoints: CreationOptional<number | null>;
  spoolPath: string | null;
  uploadedBy: number;
  receivedAt: Date;
  claimedAt: CreationOptional<Date | null>;
  fitTries: CreationOptional<number>;
  inIntake: CreationOptional<boolean>;
  readingId: CreationOptional<number | null>;
}

export function defineFrame(sequelize: Sequelize) {
  return sequelize.define<Frame>(
    'Frame',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      benchId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      setupId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      lotId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      unitId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      sourceId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      fileName: { type: DataTypes.STRING(255), allowNull: false },
      findText: { type: DataTypes.STRING(500), allowNull: false },
      bytes: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false },
      sha256: { type: DataTypes.STRING(64), allowNull: false },
      mediaType: { type: DataTypes.STRING(20), allowNull: false },
      sameKey: { type: DataTypes.STRING(120), allowNull: true },
      state: { type: DataTypes.STRING(12), allowNull: false },
      code: { type: DataTypes.STRING(40), allowNull: true },
      message: { type: DataTypes.STRING(1000), allowNull: true },
      widthPx: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      heightPx: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      detectorMm: { type: DataTypes.DOUBLE, allowNull: true },
      scanFromMm: { type: DataTypes.DOUBLE, allowNull: true },
      scanToMm: { type: DataTypes.DOUBLE, allowNull: true },
      scanPoints: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      spoolPath: { type: DataTypes.STRING(500), allowNull: true },
      uploadedBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      receivedAt: { type: DataTypes.DATE(3), allowNull: false },
      claimedAt: { type: DataTypes.DATE(3), allowNull: true },
      fitTries: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 0 },
      inIntake: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
    },
    { tableName: 'frames', modelName: 'Frame' },
  );
}
