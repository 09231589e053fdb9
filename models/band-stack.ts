import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { ToneChoice } from '@/lib/domain/reading-result';

/** A band stack of a frame, whose bytes lie in the object store under their hash. Never updated. */
export interface BandStackRow extends Model<
  InferAttributes<BandStackRow>,
  InferCreationAttributes<BandStackRow>
> {
  id: CreationOptional<number>;
  frameId: number;
  /** Version of the engine that made it; another one never measures from it. */
  engine: string;
  tone: ToneChoice;
  planJson: string;
  sha256: string;
  bytes: number;
  createdAt: Date;
}

export function defineBandStack(sequelize: Sequelize) {
  return sequelize.define<BandStackRow>(
    'BandStack',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      frameId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      engine: { type: DataTypes.STRING(40), allowNull: false },
      tone: { type: DataTypes.STRING(10), allowNull: false },
      planJson: { type: DataTypes.TEXT, allowNull: false },
      sha256: { type: DataTypes.STRING(64), allowNull: false },
      bytes: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'band_stacks', modelName: 'BandStack' },
  );
}
