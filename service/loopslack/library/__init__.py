"""Tables that ship with the service: tubes, fluids, vessel series, sources. Every row has a provenance."""
