"""Checks of a fitted model: arrays in, frozen values out; None where a check is not defined, the reason told by the caller."""
