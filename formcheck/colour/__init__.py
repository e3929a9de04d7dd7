"""Solution and film optics, observers, colour differences, hiding. Recipes lead, wavelength is last."""
