"""Decisions at an existing joint."""
