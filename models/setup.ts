import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { ToneChoice } from '@/lib/domain/reading-result';

/** One dated, immutable revision of a bench's constants. */
export interface Setup extends Model<InferAttributes<Setup>, InferCreationAttributes<Setup>> {
  id: CreationOptional<number>;
  benchId: number;
  number: number;
  plate: string;
  scaleUmPerPx: number;
  scaleStated: number;
  scaleK: number;
  scaleCertificate: string;
  scaleDue: string | null;
  separationUm: number;
  separationStated: number;
  separationK: number;
  separationCertificate: string;
  separationDue: string | null;
  widthUm: number;
  widthStated: number;
  widthK: number;
  widthCertificate: string;
  widthDue: string | null;
  distanceMm: number;
  distanceStated: number;
  distanceK: number;
  distanceCertificate: string;
  distanceDue: string | null;
  remountUNm: number | null;
  remountDof: number | null;
  tone: ToneChoice;
  why: string;
  enteredBy: number;
  enteredAt: Date;
}

export function defineSetup(sequelize: Sequelize) {
  return sequelize.define<Setup>(
    'Setup',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      benchId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      number: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      plate: { type: DataTypes.STRING(60), allowNull: false },
      scaleUmPerPx: { type: DataTypes.DOUBLE, allowNull: false },
      scaleStated: { type: DataTypes.DOUBLE, allowNull: false },
      scaleK: { type: DataTypes.DOUBLE, allowNull: false },
      scaleCertificate: { type: DataTypes.STRING(300), allowNull: false },
      scaleDue: { type: DataTypes.DATEONLY, allowNull: true },
      separationUm: { type: DataTypes.DOUBLE, allowNull: false },
      separationStated: { type: DataTypes.DOUBLE, allowNull: false },
      separationK: { type: DataTypes.DOUBLE, allowNull: false },
      separationCertificate: { type: DataTypes.STRING(300), allowNull: false },
      separationDue: { type: DataTypes.DATEONLY, allowNull: true },
      widthUm: { type: DataTypes.DOUBLE, allowNull: false },
      widthStated: { type: DataTypes.DOUBLE, allowNull: false },
      widthK: { type: DataTypes.DOUBLE, allowNull: false },
      widthCertificate: { type: DataTypes.STRING(300), allowNull: false },
      widthDue: { type: DataTypes.DATEONLY, allowNull: true },
      distanceMm: { type: DataTypes.DOUBLE, allowNull: false },
      distanceStated: { type: DataTypes.DOUBLE, allowNull: false },
      distanceK: { type: DataTypes.DOUBLE, allowNull: false },
      distanceCertificate: { type: DataTypes.STRING(300), allowNull: false },
      distanceDue: { type: DataTypes.DATEONLY, allowNull: true },
      remountUNm: { type: DataTypes.DOUBLE, allowNull: true },
      remountDof: { type: DataTypes.DOUBLE, allowNull: true },
      tone: { type: DataTypes.STRING(10), allowNull: false },
      why: { type: DataTypes.STRING(1000), allowNull: false },
      enteredBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      enteredAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'setups', modelName: 'Setup' },
  );
}
