"""From the output of a calculation, or a plain tensor file, to numbers with axes, unit and precision."""
