import fc from 'fast-check';

// A law that is broken is told by its first counterexample: shrinking one of doubles can go on for hours.
fc.configureGlobal({ endOnFailure: true });
