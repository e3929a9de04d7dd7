"""From a recipe to a Check: the only place that knows the order of the rooms."""
