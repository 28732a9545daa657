"""Mean, rms, peak and ripple over time, from states with durations."""
