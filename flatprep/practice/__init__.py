"""What rules and bench work share: pilots, engagement, fits, countersinks, bends."""
