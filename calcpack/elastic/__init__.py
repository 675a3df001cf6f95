"""The force method: redundants, flexibilities, and the curves under unit redundants."""
