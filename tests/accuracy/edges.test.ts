import { describe } from 'vitest';
import { testSuite } from './subset.ts';

describe('clean', () => testSuite('clean', 3));
describe('noisy', () => testSuite('noisy', 2));
describe('subsampled', () => testSuite('subsampled', 3));
