"""Rules from hazard_rules/ judged against a mixture: within, exceeds, or cannot tell."""
