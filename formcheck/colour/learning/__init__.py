"""From measured drawdowns and solutions to K, S or absorptivity, with how sure each is."""
