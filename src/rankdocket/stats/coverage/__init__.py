"""How often intervals cover the true value in simulated samples: the shipped table, its simulation, and the look into it."""
