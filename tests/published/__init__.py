"""Figures published for the laws of the service, as data, and what reads them."""
