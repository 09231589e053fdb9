import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { UncertaintyShape } from '@/lib/domain/setup';

/** One revision of what is known of a slit plate. */
export interface PlateCertificate extends Model<
  InferAttributes<PlateCertificate>,
  InferCreationAttributes<PlateCertificate>
> {
  id: CreationOptional<number>;
  plateId: number;
  number: number;
  separationUm: number;
  separationStated: number;
  separationShape: UncertaintyShape;
  separationK: number;
  separationDof: number | null;
  widthUm: number;
  widthStated: number;
  widthShape: UncertaintyShape;
  widthK: number;
  widthDof: number | null;
  certificate: string;
  file: string | null;
  due: string | null;
  /** What looked odd about a value and was said to be right: ConfirmedValue[]. */
  confirmedJson: string;
  enteredBy: number;
  enteredAt: Date;
}

export function definePlateCertificate(sequelize: Sequelize) {
  return sequelize.define<PlateCertificate>(
    'PlateCertificate',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      plateId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      number: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      separationUm: { type: DataTypes.DOUBLE, allowNull: false },
      separationStated: { type: DataTypes.DOUBLE, allowNull: false },
      separationShape: { type: DataTypes.STRING(12), allowNull: false },
      separationK: { type: DataTypes.DOUBLE, allowNull: false },
      separationDof: { type: DataTypes.DOUBLE, allowNull: true },
      widthUm: { type: DataTypes.DOUBLE, allowNull: false },
      widthStated: { type: DataTypes.DOUBLE, allowNull: false },
      widthShape: { type: DataTypes.STRING(12), allowNull: false },
      widthK: { type: DataTypes.DOUBLE, allowNull: false },
      widthDof: { type: DataTypes.DOUBLE, allowNull: true },
      certificate: { type: DataTypes.STRING(300), allowNull: false },
      file: { type: DataTypes.STRING(64), allowNull: true },
      due: { type: DataTypes.DATEONLY, allowNull: true },
      confirmedJson: { type: DataTypes.TEXT, allowNull: false },
      enteredBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      enteredAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'plate_certificates', modelName: 'PlateCertificate' },
  );
}
