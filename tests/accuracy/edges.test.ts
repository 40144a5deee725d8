import { describe } from 'vitest';
import { testSuite } from './subset.ts';

describe('clean', () => testSuite('clean', 12));
describe('noisy', () => testSuite('noisy', 4));
describe('subsampled', () => testSuite('subsampled', 4));
