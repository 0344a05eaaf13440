"""What people read: formatted answers, working, drawings and printed forms."""
