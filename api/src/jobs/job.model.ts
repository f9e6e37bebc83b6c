import type { CreationOptional, InferAttributes, InferCreationAttributes } from 'sequelize';
import { Column, DataType, Model, PrimaryKey, Table } from 'sequelize-typescript';

/** A job and its contract. Sums in cents, rates in basis points, business dates as YYYY-MM-DD. */
@Table({ tableName: 'job', underscored: true, timestamps: false, version: 'version' })
export class JobModel extends Model<InferAttributes<JobModel>, InferCreationAttributes<JobModel>> {
  @PrimaryKey @Column(DataType.UUID) declare id: string;
  @Column(DataType.UUID) declare firmId: string;
  @Column(DataType.TEXT) declare name: string;
  @Column(DataType.TEXT) declare street: string;
  @Column(DataType.TEXT) declare city: string;
  @Column(DataType.CHAR(2)) declare state: string;
  @Column(DataType.TEXT) declare zip: string;
  @Column(DataType.TEXT) declare timeZone: string;
  @Column(DataType.TEXT) declare style: string;
  @Column(DataType.BIGINT) declare contractSumCents: number;
  @Column(DataType.DATEONLY) declare signedOn: string;
  @Column(DataType.DATEONLY) declare startOn: string;
  @Column(DataType.DATEONLY) declare completeBy: string;
  @Column(DataType.TEXT) declare dayKind: string;
  @Column(DataType.INTEGER) declare retainageRate: number;
  @Column(DataType.BIGINT) declare depositCents: number;
  @Column(DataType.SMALLINT) declare reviewDays: number;
  @Column(DataType.SMALLINT) declare paymentDays: number;
  @Column(DataType.INTEGER) declare lateRate: number;
  @Column(DataType.TEXT) declare homeownersSign: string;
  @Column(DataType.BOOLEAN) declare openBook: boolean;
  @Column(DataType.BIGINT) declare changesApprovedCents: CreationOptional<number>;
  @Column(DataType.INTEGER) declare daysApproved: CreationOptional<number>;
  @Column(DataType.UUID) declare createdBy: string;
  @Column(DataType.DATE) declare createdAt: Date;
  @Column(DataType.INTEGER) declare version: CreationOptional<number>;
}
