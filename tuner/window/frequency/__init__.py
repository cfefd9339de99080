"""The frequency page: Bode, Nyquist and sensitivity plots of the whole family."""
