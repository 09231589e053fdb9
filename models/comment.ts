import {
  DataTypes,
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  type Model,
  type Sequelize,
} from 'sequelize';

/** A word on a reading, beside its life. */
export interface ReadingComment extends Model<
  InferAttributes<ReadingComment>,
  InferCreationAttributes<ReadingComment>
> {
  id: CreationOptional<number>;
  readingId: number;
  words: string;
  madeBy: number;
  madeAt: Date;
}

export function defineReadingComment(sequelize: Sequelize) {
  return sequelize.define<ReadingComment>(
    'ReadingComment',
    {
      id: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, autoIncrement: true, primaryKey: true },
      readingId: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      words: { type: DataTypes.STRING(1000), allowNull: false },
      madeBy: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false },
      madeAt: { type: DataTypes.DATE(3), allowNull: false },
    },
    { tableName: 'comments', modelName: 'ReadingComment' },
  );
}
