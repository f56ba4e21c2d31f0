"""Damaged input through the commands a person types; ``python -m tests.fuzz`` runs thousands of cases."""
