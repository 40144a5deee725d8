import { describe } from 'vitest';
import { testSuite } from './subset.ts';

describe('exposure', () => testSuite('exposure', 3));
describe('colour', () => testSuite('colour', 2));
describe('shading', () => testSuite('shading', 3));
describe('noise', () => testSuite('noise', 2));
