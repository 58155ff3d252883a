"""Figures and pictures as bytes, drawn from chart data; no number is made here."""
