"""The toewright command."""
