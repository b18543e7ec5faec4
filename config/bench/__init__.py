"""Lists made for measuring, and the measuring: speed and memory as ratios in one run."""
