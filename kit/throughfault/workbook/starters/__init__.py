"""Unit files to start from, one for each kind of transformer."""
