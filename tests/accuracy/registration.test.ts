import { describe } from 'vitest';
import { testSuite } from './subset.ts';

describe('registration', () => testSuite('registration', 6));
