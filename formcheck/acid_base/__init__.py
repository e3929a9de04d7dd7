"""Protons in water: the pH of a mixture, the form of each dye, what reaches a wanted pH."""
