"""Beadwright: sizing, checking and recording of elastomeric sealant joints, without a network."""

__version__ = "0.1.0"
