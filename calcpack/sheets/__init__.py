"""What the sheets show: figures and blocks, still without any typesetter."""
