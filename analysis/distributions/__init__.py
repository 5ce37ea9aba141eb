"""Distributions that scipy lacks or gives too slowly: studentised range, Dunnett's, noncentral F intervals."""
