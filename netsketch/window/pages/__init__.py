"""The pages of the inspector: one for each kind of thing it answers for."""
