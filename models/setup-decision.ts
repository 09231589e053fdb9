import {
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';
import type { SetupDecision } from '@/lib/domain/setup';

/** What a second person decided about a proposed setup, once. */
export interface SetupDecisionRow extends Model<
  InferAttributes<SetupDecisionRow>,
  InferCreationAttributes<SetupDecisionRow>
> {
  setupId: number;
  decision: SetupDecision;
  /** Only of an approval. */
  inForceFrom: Date | null;
  reason: string;
  decidedBy: number;
  decidedAt: Date;
}

export function defineSetupDecision(sequelize: Sequelize) {
  return sequelize.define<SetupDecisionRow>(
    'SetupDecisionRow',
    {
      setupId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, primaryKey: true },
      decision: { type: DataTypes.STRING(12), allowNull: false },
      inForceFrom: { type: DataTypes.DATE(3), allowNull: true },
      reason: { type: DataTypes.STRING(1000), allowNull: false },
      decidedBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      decidedAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'setup_decisions', modelName: 'SetupDecisionRow' },
  );
}
