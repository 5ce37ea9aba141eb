"""Whether another defensible analysis would have answered otherwise."""
