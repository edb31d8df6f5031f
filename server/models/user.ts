import { DataTypes, Model, type CreationOptional, type InferAttributes, type InferCreationAttributes, type Sequelize } from 'sequelize'
import { newId } from './new-id.ts'

/** A person who may sign in; never deleted, only deactivated. */
export class User extends Model<InferAttributes<User>, InferCreationAttributes<User>> {
  declare id: CreationOptional<string>
  declare email: string
  declare name: string
  declare passPhraseHash: string
  declare mustChangePassPhrase: CreationOptional<boolean>
  declare signatureAcceptedAt: CreationOptional<Date | null>
  declare isActive: CreationOptional<boolean>
  declare version: CreationOptional<number>
  declare createdAt: CreationOptional<Date>
  declare updatedAt: CreationOptional<Date>
}

export function defineUser(sequelize: Sequelize): void {
  User.init(
    {
      id: { type: DataTypes.UUID, primaryKey: true, defaultValue: newId },
      email: { type: DataTypes.STRING, allowNull: false },
      name: { type: DataTypes.STRING, allowNull: false },
      passPhraseHash: { type: DataTypes.STRING, allowNull: false },
      mustChangePassPhrase: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: false },
      signatureAcceptedAt: { type: DataTypes.DATE(3), allowNull: true, defaultValue: null },
      isActive: { type: DataTypes.BOOLEAN, allowNull: false, defaultValue: true },
      version: { type: DataTypes.INTEGER.UNSIGNED, allowNull: false, defaultValue: 1 },
      createdAt: DataTypes.DATE(3),
      updatedAt: DataTypes.DATE(3),
    },
    { sequelize, tableName: 'users', underscored: true, timestamps: true },
  )
}
