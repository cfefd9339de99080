"""The loop running on in time, to be disturbed and retuned while it runs: the delivered law, sample by sample."""
