"""What a recipe weighs, fills and leaves behind: density, volumes, dry film, solvent given off."""
