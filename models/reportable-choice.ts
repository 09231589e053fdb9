import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** Which of a unit's readings is reported. A later choice stands beside the earlier one; the newest counts. */
export interface ReportableChoice extends Model<
  InferAttributes<ReportableChoice>,
  InferCreationAttributes<ReportableChoice>
> {
  id: CreationOptional<number>;
  unitId: number;
  readingId: number;
  reason: string;
  chosenBy: number;
  chosenAt: Date;
}

export function defineReportableChoice(sequelize: Sequelize) {
  return sequelize.define<ReportableChoice>(
    'ReportableChoice',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      unitId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      reason: { type: DataTypes.STRING(1000), allowNull: false },
      chosenBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      chosenAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'reportable_choices', modelName: 'ReportableChoice' },
  );
}
