"""What the engineer says, as frozen data: the loop, its blocks, the trial, the limits, and the tuning sheet of all."""
