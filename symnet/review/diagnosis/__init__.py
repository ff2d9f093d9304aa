"""Why a line is false: hypotheses about the slip, each tested exactly on the line with that slip put right."""
