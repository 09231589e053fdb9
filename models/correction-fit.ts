import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { Verdict } from '@/lib/domain/specification';

/** What a reading would be with the values of a setup that corrects the past; or why there is no answer. */
export interface CorrectionFit extends Model<
  InferAttributes<CorrectionFit>,
  InferCreationAttributes<CorrectionFit>
> {
  setupId: number;
  readingId: number;
  message: string | null;
  valueNm: number | null;
  expandedNm: number | null;
  verdict: Verdict | null;
  optionsJson: string | null;
  resultJson: string | null;
  madeAt: Date;
}

export function defineCorrectionFit(sequelize: Sequelize) {
  return sequelize.define<CorrectionFit>(
    'CorrectionFit',
    {
      setupId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      message: { type: DataTypes.STRING(1000), allowNull: true },
      valueNm: { type: DataTypes.DOUBLE, allowNull: true },
      expandedNm: { type: DataTypes.DOUBLE, allowNull: true },
      verdict: { type: DataTypes.STRING(12), allowNull: true },
      optionsJson: { type: DataTypes.TEXT('long'), allowNull: true },
      resultJson: { type: DataTypes.TEXT('long'), allowNull: true },
      madeAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'correction_fits', modelName: 'CorrectionFit' },
  );
}
