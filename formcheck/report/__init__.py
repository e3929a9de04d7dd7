"""What formcheck shows: terminal, page and plots. It shows records; it reckons no science."""
