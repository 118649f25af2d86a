import { format } from 'node:util';
import { afterEach, beforeEach, expect } from 'vitest';

// A test that expects an error on the console spies on it itself and so keeps it from this guard.
const original = console.error;
let errors: string[] = [];

beforeEach(() => {
  errors = [];
  console.error = (...values: unknown[]) => {
    errors.push(format(...values));
    original(...values);
  };
});

afterEach(() => {
  console.error = original;
  expect(errors, 'unexpected console.error').toEqual([]);
});
