"""Records, conditions, planning and cautions for addition reactions of fullerenes."""
