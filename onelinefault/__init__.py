"""Draw a plant, click a bus, see the fault."""
