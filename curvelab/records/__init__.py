"""The frozen records that travel between the rooms; they need NumPy alone and know nothing of where they come from."""
