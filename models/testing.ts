import {
  type CreationOptional,
  type InferAttributes,
  type InferCreationAttributes,
  Model,
  type NonAttribute,
  type Sequelize,
} from 'sequelize';
import type { Capture } from '@/analysis/image';
import type {
  Edge,
  Kind,
  Metric,
  Plots,
  RegistrationSummary,
  Analysis as Result,
  Warning,
} from '@/analysis/result';
import type { ShotState } from '@/lib/shared/words';
import type { CameraModel, Unit } from './bench';
import {
  hash,
  id,
  json,
  now,
  optionalJson,
  optionalReference,
  optionalText,
  real,
  reference,
  text,
  whole,
} from './columns';
import type { User } from './people';

export class Run extends Model<InferAttributes<Run>, InferCreationAttributes<Run>> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare unitId: string;
  declare title: string;
  declare phase: 'before' | 'after';
  declare startedById: string;
  declare startedAt: CreationOptional<Date>;
  declare unit?: NonAttribute<Unit>;
  declare shots?: NonAttribute<Shot[]>;
}

/** One file as it came, immutable in the store under its hash; one a shop. */
export class Original extends Model<InferAttributes<Original>, InferCreationAttributes<Original>> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare sha256: string;
  declare bytes: number;
  /** image/jpeg … as found in the bytes, not as claimed. */
  declare mediaType: string;
  /** Where it lies in the object store. */
  declare key: string;
  declare addedById: string;
  declare createdAt: CreationOptional<Date>;
}

export class Shot extends Model<InferAttributes<Shot>, InferCreationAttributes<Shot>> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare runId: string;
  declare originalId: string;
  /** The file's name as it came. */
  declare name: string;
  declare state: CreationOptional<ShotState>;
  /** What the analysis is told to look for; 'auto' lets it decide. */
  declare requestedKind: CreationOptional<Kind | 'auto'>;
  declare kind: CreationOptional<Kind | null>;
  /** 0…1 while analysing. */
  declare progress: CreationOptional<number>;
  /** As the camera wrote it, no zone. */
  declare takenAt: CreationOptional<string | null>;
  /** One sentence when the shot failed. */
  declare error: CreationOptional<string | null>;
  declare warnings: CreationOptional<number>;
  declare latestAnalysisId: CreationOptional<string | null>;
  declare addedById: string;
  declare addedAt: CreationOptional<Date>;
  /** Moves whenever a page that shows the shot should look again. */
  declare changedAt: CreationOptional<Date>;
  declare original?: NonAttribute<Original>;
  declare run?: NonAttribute<Run>;
  declare latestAnalysis?: NonAttribute<Analysis>;
  declare analyses?: NonAttribute<Analysis[]>;
  declare addedBy?: NonAttribute<User>;
}

/** A picture derived from an original: `thumb`, `view`, or `crop-<station>`. */
export interface DerivedPicture {
  name: string;
  key: string;
  mediaType: string;
  bytes: number;
  sha256: string;
  width: number;
  height: number;
  /** The station that a crop shows. */
  station?: string;
}

/** What one run of the measuring code found in one shot. Never overwritten: analysing again adds a row. */
export class Analysis extends Model<InferAttributes<Analysis>, InferCreationAttributes<Analysis>> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare shotId: string;
  declare version: string;
  declare kind: Kind;
  declare width: number;
  declare height: number;
  declare capture: Capture;
  declare registration: CreationOptional<RegistrationSummary | null>;
  declare metrics: Metric[];
  declare warnings: Warning[];
  declare milliseconds: Result['milliseconds'];
  declare plots: Plots;
  declare pictures: DerivedPicture[];
  declare at: CreationOptional<Date>;
  declare shot?: NonAttribute<Shot>;
  declare measurements?: NonAttribute<Measurement[]>;
}

/** One number of one analysis. Zone and edge are '' for the whole frame, so that the unique index holds. */
export class Measurement extends Model<
  InferAttributes<Measurement>,
  InferCreationAttributes<Measurement>
> {
  declare id: CreationOptional<string>;
  declare shopId: string;
  declare analysisId: string;
  declare modelId: string;
  declare unitId: string;
  declare name: string;
  declare zone: CreationOptional<string>;
  declare edge: CreationOptional<Edge | ''>;
  declare value: number;
  declare unit: string;
  /** Standard uncertainty within this shot. */
  declare uncertainty: number;
  declare analysis?: NonAttribute<Analysis>;
  declare cameraModel?: NonAttribute<CameraModel>;
}

export function defineTesting(sequelize: Sequelize) {
  return {
    Run: class extends Run {}.init(
      {
        id: id(),
        shopId: reference(),
        unitId: reference(),
        title: text(80),
        phase: text(10),
        startedById: reference(),
        startedAt: now(),
      },
      { sequelize, modelName: 'Run', tableName: 'runs' },
    ),
    Original: class extends Original {}.init(
      {
        id: id(),
        shopId: reference(),
        sha256: hash(),
        bytes: whole(),
        mediaType: text(40),
        key: text(200),
        addedById: reference(),
        createdAt: now(),
      },
      { sequelize, modelName: 'Original', tableName: 'originals' },
    ),
    Shot: class extends Shot {}.init(
      {
        id: id(),
        shopId: reference(),
        runId: reference(),
        originalId: reference(),
        name: text(255),
        state: { ...text(20), defaultValue: 'queued' },
        requestedKind: { ...text(20), defaultValue: 'auto' },
        kind: optionalText(20),
        progress: { ...real(), defaultValue: 0 },
        takenAt: optionalText(30),
        error: optionalText(1000),
        warnings: { ...whole(), defaultValue: 0 },
        latestAnalysisId: optionalReference(),
        addedById: reference(),
        addedAt: now(),
        changedAt: now(),
      },
      { sequelize, modelName: 'Shot', tableName: 'shots' },
    ),
    Analysis: class extends Analysis {}.init(
      {
        id: id(),
        shopId: reference(),
        shotId: reference(),
        version: text(20),
        kind: text(20),
        width: whole(),
        height: whole(),
        capture: json(),
        registration: optionalJson(),
        metrics: json(),
        warnings: json(),
        milliseconds: json(),
        plots: json(),
        pictures: json(),
        at: now(),
      },
      { sequelize, modelName: 'Analysis', tableName: 'analyses' },
    ),
    Measurement: class extends Measurement {}.init(
      {
        id: id(),
        shopId: reference(),
        analysisId: reference(),
        modelId: reference(),
        unitId: reference(),
        name: text(40),
        zone: { ...text(20), defaultValue: '' },
        edge: { ...text(12), defaultValue: '' },
        value: real(),
        unit: text(12),
        uncertainty: real(),
      },
      { sequelize, modelName: 'Measurement', tableName: 'measurements' },
    ),
  };
}
