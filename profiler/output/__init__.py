"""Tellings of one result: record, words, figure, map, exchange."""
