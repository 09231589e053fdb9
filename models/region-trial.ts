import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A region a person stopped at while changing it, and the value their page showed for it. */
export interface RegionTrial extends Model<
  InferAttributes<RegionTrial>,
  InferCreationAttributes<RegionTrial>
> {
  id: CreationOptional<number>;
  frameId: number;
  /** The reading the change began from; null on a frame that had none. */
  fromReadingId: number | null;
  /** The reading that came of the change, where it was kept. */
  keptReadingId: number | null;
  changeJson: string;
  valueNm: number | null;
  expandedNm: number | null;
  problem: string | null;
  triedBy: number;
  triedAt: Date;
}

export function defineRegionTrial(sequelize: Sequelize) {
  return sequelize.define<RegionTrial>(
    'RegionTrial',
    {
      id: { type: DataTypes.BIGINT.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      frameId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      fromReadingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      keptReadingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: true },
      changeJson: { type: DataTypes.TEXT, allowNull: false },
      valueNm: { type: DataTypes.DOUBLE, allowNull: true },
      expandedNm: { type: DataTypes.DOUBLE, allowNull: true },
      problem: { type: DataTypes.STRING(300), allowNull: true },
      triedBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      triedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'region_trials', modelName: 'RegionTrial' },
  );
}
