import {
  type CreationOptional,
  DataTypes,
  type InferAttributes,
  type InferCreationAttributes,
  Model,
  type NonAttribute,
  type Sequelize,
} from 'sequelize';
import type { RuleOutcome } from '@/lib/shared/report';
import type { Letter, ModelClass } from '@/lib/shared/words';
import type { Unit } from './bench';
import {
  flag,
  hash,
  id,
  json,
  now,
  optionalLongText,
  optionalReal,
  optionalReference,
  optionalText,
  optionalTime,
  reference,
  text,
  whole,
} from './columns';
import type { User } from './people';
import type { Run } from './testing';

export class Scheme extends Model<InferAttributes<Scheme>, InferCreationAttributes<Scheme>> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare modelClass: ModelClass;
  declare version: number;
  declare name: string;
  /** The rules as lib/server's schemes read them. */
  declare rules: unknown;
  declare createdAt: CreationOptional<Date>;
}

export class Grade extends Model<InferAttributes<Grade>, InferCreationAttributes<Grade>> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare unitId: string;
  declare runId: string;
  declare schemeId: string;
  declare letter: Letter;
  declare proposed: Letter;
  /** Why the letter differs from the proposal. */
  declare reason: CreationOptional<string | null>;
  declare signedById: string;
  declare signedAt: CreationOptional<Date>;
  /** Signed by someone who also worked on the unit, as the shop allows. */
  declare ownWork: CreationOptional<boolean>;
  /** The analyses that the grade rests on. */
  declare analysisIds: string[];
  /** The unit's id while this grade stands, null once superseded: its unique index lets one grade stand at a time. */
  declare standingUnitId: string | null;
  declare supersededAt: CreationOptional<Date | null>;
  declare unit?: NonAttribute<Unit>;
  declare run?: NonAttribute<Run>;
  declare scheme?: NonAttribute<Scheme>;
  declare signedBy?: NonAttribute<User>;
  declare ruleResults?: NonAttribute<RuleResult[]>;
}

/** A rule's outcome as it stood when the grade was signed. */
export class RuleResult extends Model<
  InferAttributes<RuleResult>,
  InferCreationAttributes<RuleResult>
> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare gradeId: string;
  declare position: number;
  declare ruleId: string;
  declare value: CreationOptional<number | null>;
  declare standing: RuleOutcome['standing'];
  declare allows: Letter;
  declare outcome: RuleOutcome;
}

export class Report extends Model<InferAttributes<Report>, InferCreationAttributes<Report>> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare unitId: string;
  declare slug: string;
  declare withdrawnAt: CreationOptional<Date | null>;
  declare withdrawReason: CreationOptional<string | null>;
  declare withdrawnById: CreationOptional<string | null>;
  declare createdAt: CreationOptional<Date>;
  declare unit?: NonAttribute<Unit>;
  declare versions?: NonAttribute<ReportVersion[]>;
}

/** Frozen: the bytes that were published, and their hash. */
export class ReportVersion extends Model<
  InferAttributes<ReportVersion>,
  InferCreationAttributes<ReportVersion>
> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare reportId: string;
  declare gradeId: string;
  declare version: number;
  /** Canonical JSON (RFC 8785) of a ReportContent. */
  declare content: string;
  declare sha256: string;
  /** Name on the page → key in the object store. */
  declare pictures: { name: string; key: string; mediaType: string }[];
  declare publishedById: string;
  declare publishedAt: CreationOptional<Date>;
  declare report?: NonAttribute<Report>;
  declare grade?: NonAttribute<Grade>;
}

export function defineGrading(sequelize: Sequelize) {
  return {
    Scheme: class extends Scheme {}.init(
      {
        id: id(),
        shopId: reference(),
        modelClass: text(40),
        version: whole(),
        name: text(120),
        rules: json(),
        createdAt: now(),
      },
      { sequelize, modelName: 'Scheme', tableName: 'schemes' },
    ),
    Grade: class extends Grade {}.init(
      {
        id: id(),
        shopId: reference(),
        unitId: reference(),
        runId: reference(),
        schemeId: reference(),
        letter: text(10),
        proposed: text(10),
        reason: optionalLongText(),
        signedById: reference(),
        signedAt: now(),
        ownWork: flag(false),
        analysisIds: json(),
        standingUnitId: optionalReference(),
        supersededAt: optionalTime(),
      },
      { sequelize, modelName: 'Grade', tableName: 'grades' },
    ),
    RuleResult: class extends RuleResult {}.init(
      {
        id: id(),
        shopId: reference(),
        gradeId: reference(),
        position: whole(),
        ruleId: text(60),
        value: optionalReal(),
        standing: text(20),
        allows: text(10),
        outcome: json(),
      },
      { sequelize, modelName: 'RuleResult', tableName: 'rule_results' },
    ),
    Report: class extends Report {}.init(
      {
        id: id(),
        shopId: reference(),
        unitId: reference(),
        slug: text(40),
        withdrawnAt: optionalTime(),
        withdrawReason: optionalText(500),
        withdrawnById: optionalReference(),
        createdAt: now(),
      },
      { sequelize, modelName: 'Report', tableName: 'reports' },
    ),
    ReportVersion: class extends ReportVersion {}.init(
      {
        id: id(),
        shopId: reference(),
        reportId: reference(),
        gradeId: reference(),
        version: whole(),
        content: { type: DataTypes.TEXT('long'), allowNull: false },
        sha256: hash(),
        pictures: json(),
        publishedById: reference(),
        publishedAt: now(),
      },
      { sequelize, modelName: 'ReportVersion', tableName: 'report_versions' },
    ),
  };
}
