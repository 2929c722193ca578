"""What each value means and which calculation gives it, one module a subject."""
