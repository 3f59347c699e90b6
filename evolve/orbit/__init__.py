"""Two bodies and their orbit: Kepler relations, Roche lobes by fit and exactly."""
