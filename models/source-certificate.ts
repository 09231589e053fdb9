import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** One revision of what a source's wavelength stands on. */
export interface SourceCertificate extends Model<
  InferAttributes<SourceCertificate>,
  InferCreationAttributes<SourceCertificate>
> {
  id: CreationOptional<number>;
  sourceId: number;
  number: number;
  vacuumNm: number;
  uNm: number;
  certificate: string;
  file: string | null;
  due: string | null;
  enteredBy: number;
  enteredAt: Date;
}

export function defineSourceCertificate(sequelize: Sequelize) {
  return sequelize.define<SourceCertificate>(
    'SourceCertificate',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      sourceId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      number: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      vacuumNm: { type: DataTypes.DOUBLE, allowNull: false },
      uNm: { type: DataTypes.DOUBLE, allowNull: false },
      certificate: { type: DataTypes.STRING(300), allowNull: false },
      file: { type: DataTypes.STRING(64), allowNull: true },
      due: { type: DataTypes.DATEONLY, allowNull: true },
      enteredBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      enteredAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'source_certificates', modelName: 'SourceCertificate' },
  );
}
