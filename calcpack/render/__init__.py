"""Sheets put into the languages of typesetters and browsers."""
