"""Corner and axle solves with their results."""
