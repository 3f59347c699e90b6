"""Figures of histories: functions that take histories and return a matplotlib Figure."""
