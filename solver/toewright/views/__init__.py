"""What people look at: plots, scenes, reports."""
