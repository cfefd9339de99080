"""One file per target language, proved against the simulation before it is handed over."""
