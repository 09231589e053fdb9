import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A certificate as it was handed in. Its bytes lie in the store under their SHA-256. */
export interface CertificateFile extends Model<
  InferAttributes<CertificateFile>,
  InferCreationAttributes<CertificateFile>
> {
  sha256: string;
  fileName: string;
  mediaType: string;
  bytes: number;
  addedBy: number;
  addedAt: Date;
}

export function defineCertificateFile(sequelize: Sequelize) {
  return sequelize.define<CertificateFile>(
    'CertificateFile',
    {
      sha256: { type: DataTypes.STRING(64), allowNull: false, primaryKey: true },
      fileName: { type: DataTypes.STRING(255), allowNull: false },
      mediaType: { type: DataTypes.STRING(40), allowNull: false },
      bytes: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      addedBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      addedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'certificate_files', modelName: 'CertificateFile' },
  );
}
