"""How findings are drawn: each figure a function of findings and a look, its caption and description beside it."""
