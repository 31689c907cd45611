"""Studies on many designs: what a change of a hardpoint does."""
