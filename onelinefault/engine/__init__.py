"""From a plant to currents and voltages: pure functions, no Qt, no files."""
