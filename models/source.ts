import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { SourceKind } from '@/lib/domain/source';

/** A source of known wavelength, with the newest of its certificates. */
export interface Source extends Model<InferAttributes<Source>, InferCreationAttributes<Source>> {
  id: CreationOptional<number>;
  name: string;
  kind: SourceKind;
  /** May a bench be checked with it? */
  isReference: boolean;
  vacuumNm: number;
  uNm: number;
  certificate: string;
  file: string | null;
  due: string | null;
  note: string;
  createdBy: number;
  createdAt: Date;
}

export function defineSource(sequelize: Sequelize) {
  return sequelize.define<Source>(
    'Source',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      name: { type: DataTypes.STRING(60), allowNull: false },
      kind: { type: DataTypes.STRING(20), allowNull: false },
      isReference: { type: DataTypes.BOOLEAN, allowNull: false },
      vacuumNm: { type: DataTypes.DOUBLE, allowNull: false },
      uNm: { type: DataTypes.DOUBLE, allowNull: false },
      certificate: { type: DataTypes.STRING(300), allowNull: false },
      file: { type: DataTypes.STRING(64), allowNull: true },
      due: { type: DataTypes.DATEONLY, allowNull: true },
      note: { type: DataTypes.STRING(300), allowNull: false },
      createdBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      createdAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'sources', modelName: 'Source' },
  );
}
