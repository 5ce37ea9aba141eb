"""A second opinion on every number: exact arithmetic over fractions and 50-digit tails, sharing nothing with the engine."""
