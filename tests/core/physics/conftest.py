"""No time limit on single Hypothesis examples: the machine may be busy, and the budgets have their own tests."""

from hypothesis import settings

settings.register_profile("no-deadline", parent=settings(), deadline=None)
settings.load_profile("no-deadline")
