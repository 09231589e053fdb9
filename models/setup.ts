import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { ToneChoice } from '@/lib/domain/reading-result';
import type { UncertaintyShape } from '@/lib/domain/setup';

/** One immutable revision of a bench's constants as it was proposed; `setup_decisions` says what became of it. */
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
  scaleShape: UncertaintyShape;
  scaleDof: number | null;
  scaleFile: string | null;
  separationUm: number;
  separationStated: number;
  separationK: number;
  separationCertificate: string;
  separationDue: string | null;
  separationShape: UncertaintyShape;
  separationDof: number | null;
  separationFile: string | null;
  widthUm: number;
  widthStated: number;
  widthK: number;
  widthCertificate: string;
  widthDue: string | null;
  widthShape: UncertaintyShape;
  widthDof: number | null;
  widthFile: string | null;
  distanceMm: number;
  distanceStated: number;
  distanceK: number;
  distanceCertificate: string;
  distanceDue: string | null;
  distanceShape: UncertaintyShape;
  distanceDof: number | null;
  distanceFile: string | null;
  remountUNm: number | null;
  remountDof: number | null;
  tone: ToneChoice;
  cameraModel: string;
  cameraSerial: string;
  /** Bits of one value as the camera writes it. */
  cameraBits: number | null;
  why: string;
  /** What looked odd about a value and was said to be right: ConfirmedValue[]. */
  confirmedJson: string;
  /** False for setups entered before approval was asked for: in force from the moment they were entered. */
  needsApproval: boolean;
  /** Null: as soon as it is approved. */
  wantedFrom: Date | null;
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
      scaleShape: { type: DataTypes.STRING(12), allowNull: false },
      scaleDof: { type: DataTypes.DOUBLE, allowNull: true },
      scaleFile: { type: DataTypes.STRING(64), allowNull: true },
      separationUm: { type: DataTypes.DOUBLE, allowNull: false },
      separationStated: { type: DataTypes.DOUBLE, allowNull: false },
      separationK: { type: DataTypes.DOUBLE, allowNull: false },
      separationCertificate: { type: DataTypes.STRING(300), allowNull: false },
      separationDue: { type: DataTypes.DATEONLY, allowNull: true },
      separationShape: { type: DataTypes.STRING(12), allowNull: false },
      separationDof: { type: DataTypes.DOUBLE, allowNull: true },
      separationFile: { type: DataTypes.STRING(64), allowNull: true },
      widthUm: { type: DataTypes.DOUBLE, allowNull: false },
      widthStated: { type: DataTypes.DOUBLE, allowNull: false },
      widthK: { type: DataTypes.DOUBLE, allowNull: false },
      widthCertificate: { type: DataTypes.STRING(300), allowNull: false },
      widthDue: { type: DataTypes.DATEONLY, allowNull: true },
      widthShape: { type: DataTypes.STRING(12), allowNull: false },
      widthDof: { type: DataTypes.DOUBLE, allowNull: true },
      widthFile: { type: DataTypes.STRING(64), allowNull: true },
      distanceMm: { type: DataTypes.DOUBLE, allowNull: false },
      distanceStated: { type: DataTypes.DOUBLE, allowNull: false },
      distanceK: { type: DataTypes.DOUBLE, allowNull: false },
      distanceCertificate: { type: DataTypes.STRING(300), allowNull: false },
      distanceDue: { type: DataTypes.DATEONLY, allowNull: true },
      distanceShape: { type: DataTypes.STRING(12), allowNull: false },
      distanceDof: { type: DataTypes.DOUBLE, allowNull: true },
      distanceFile: { type: DataTypes.STRING(64), allowNull: true },
      remountUNm: { type: DataTypes.DOUBLE, allowNull: true },
      remountDof: { type: DataTypes.DOUBLE, allowNull: true },
      tone: { type: DataTypes.STRING(10), allowNull: false },
      cameraModel: { type: DataTypes.STRING(80), allowNull: false },
      cameraSerial: { type: DataTypes.STRING(80), allowNull: false },
      cameraBits: { type: DataTypes.TINYINT.UNSIGNED, allowNull: true },
      why: { type: DataTypes.STRING(1000), allowNull: false },
      confirmedJson: { type: DataTypes.TEXT, allowNull: false },
      needsApproval: { type: DataTypes.BOOLEAN, allowNull: false },
      wantedFrom: { type: DataTypes.DATE(3), allowNull: true },
      enteredBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      enteredAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'setups', modelName: 'Setup' },
  );
}
