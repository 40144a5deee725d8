import {
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  Model,
  type NonAttribute,
  type Sequelize,
} from 'sequelize';
import type { CheckOutcome, LogKind, ModelClass, UnitState } from '@/lib/shared/words';
import {
  id,
  json,
  longText,
  now,
  optionalReference,
  optionalText,
  optionalWhole,
  reference,
  text,
} from './columns';
import type { User } from './people';

export class CameraModel extends Model<
  InferAttributes<CameraModel>,
  InferCreationAttributes<CameraModel>
> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare maker: string;
  declare name: string;
  declare modelClass: ModelClass;
  declare createdAt: CreationOptional<Date>;
}

export class Unit extends Model<InferAttributes<Unit>, InferCreationAttributes<Unit>> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare modelId: string;
  /** ML-0042, unique in a shop. */
  declare tag: string;
  declare serial: string;
  /** Changed only together with a StateChange row. */
  declare state: UnitState;
  declare fault: string;
  declare source: CreationOptional<string | null>;
  declare priceMinor: CreationOptional<number | null>;
  declare accessories: string[];
  declare condition: CreationOptional<string | null>;
  declare receivedById: string;
  declare receivedAt: CreationOptional<Date>;
  declare changedAt: CreationOptional<Date>;
  declare cameraModel?: NonAttribute<CameraModel>;
  declare receivedBy?: NonAttribute<User>;
}

export class StateChange extends Model<
  InferAttributes<StateChange>,
  InferCreationAttributes<StateChange>
> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare unitId: string;
  declare fromState: UnitState | null;
  declare toState: UnitState;
  declare note: CreationOptional<string | null>;
  declare byId: string;
  declare at: CreationOptional<Date>;
  declare by?: NonAttribute<User>;
}

/** Amended by a later entry, never edited. */
export class LogEntry extends Model<InferAttributes<LogEntry>, InferCreationAttributes<LogEntry>> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare unitId: string;
  declare kind: LogKind;
  declare text: string;
  declare minutes: CreationOptional<number | null>;
  declare costMinor: CreationOptional<number | null>;
  declare amendsId: CreationOptional<string | null>;
  declare byId: string;
  declare at: CreationOptional<Date>;
  declare by?: NonAttribute<User>;
}

/** The newest row of an item counts; earlier ones stay. */
export class FunctionCheck extends Model<
  InferAttributes<FunctionCheck>,
  InferCreationAttributes<FunctionCheck>
> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare unitId: string;
  declare item: string;
  declare outcome: CheckOutcome;
  declare note: CreationOptional<string | null>;
  declare byId: string;
  declare at: CreationOptional<Date>;
  declare by?: NonAttribute<User>;
}

export function defineBench(sequelize: Sequelize) {
  return {
    CameraModel: class extends CameraModel {}.init(
      {
        id: id(),
        shopId: reference(),
        maker: text(60),
        name: text(60),
        modelClass: text(40),
        createdAt: now(),
      },
      { sequelize, modelName: 'CameraModel', tableName: 'camera_models' },
    ),
    Unit: class extends Unit {}.init(
      {
        id: id(),
        shopId: reference(),
        modelId: reference(),
        tag: text(20),
        serial: text(60),
        state: text(20),
        fault: text(500),
        source: optionalText(120),
        priceMinor: optionalWhole(),
        accessories: json(),
        condition: optionalText(500),
        receivedById: reference(),
        receivedAt: now(),
        changedAt: now(),
      },
      { sequelize, modelName: 'Unit', tableName: 'units' },
    ),
    StateChange: class extends StateChange {}.init(
      {
        id: id(),
        shopId: reference(),
        unitId: reference(),
        fromState: optionalText(20),
        toState: text(20),
        note: optionalText(500),
        byId: reference(),
        at: now(),
      },
      { sequelize, modelName: 'StateChange', tableName: 'state_changes' },
    ),
    LogEntry: class extends LogEntry {}.init(
      {
        id: id(),
        shopId: reference(),
        unitId: reference(),
        kind: text(20),
        text: longText(),
        minutes: optionalWhole(),
        costMinor: optionalWhole(),
        amendsId: optionalReference(),
        byId: reference(),
        at: now(),
      },
      { sequelize, modelName: 'LogEntry', tableName: 'log_entries' },
    ),
    FunctionCheck: class extends FunctionCheck {}.init(
      {
        id: id(),
        shopId: reference(),
        unitId: reference(),
        item: text(40),
        outcome: text(20),
        note: optionalText(300),
        byId: reference(),
        at: now(),
      },
      { sequelize, modelName: 'FunctionCheck', tableName: 'function_checks' },
    ),
  };
}
