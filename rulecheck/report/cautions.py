"""What no report of this program may be taken for."""

CAUTIONS = (
    "A clean result is no safety approval: the analysis sees ideal switching states, not spikes,"
    " heat, layout or faults.",
    "Capacitors and batteries keep their charge: discharge, isolate and measure before touching.",
    "Local codes and licensed practice decide what may be built, connected and switched on.",
)
