"""The invented scenario: Riverside pumping station and its switchgear by Quolvane, a maker that does not exist."""
