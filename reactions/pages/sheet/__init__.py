"""The reaction sheet: plan, run, readout, sign-off, each section a form of its own; and its print."""
