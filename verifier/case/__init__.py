"""Case files: text in, checked records out."""
