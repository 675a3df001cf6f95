"""Second methods: the same influence lines and placements found again, another way."""
