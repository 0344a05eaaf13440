"""Decisions for a new joint."""
