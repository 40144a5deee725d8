import { describe } from 'vitest';
import { testSuite } from './subset.ts';

describe('lens cap', () => testSuite('lens cap', 4));
describe('dust', () => testSuite('dust', 4));
describe('card', () => testSuite('card', 4));
describe('flat field', () => testSuite('flat field', 4));
