import { describe } from 'vitest';
import { testSuite } from './subset.ts';

describe('exposure ladder', () => testSuite('ladder', 2));
describe('timing page', () => testSuite('timing', 2));
