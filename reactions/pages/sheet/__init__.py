"""The reaction sheet (plan, run, readout, sign-off, each part a form of its own) and its print."""
