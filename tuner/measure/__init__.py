"""From traces to measures: numbers read off curves that were sampled finely, whole families at once."""
