"""What the maker wrote: the recipe's form, its readers, its amounts as masses."""
