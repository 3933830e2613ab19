"""What the user says: the section file, its shapes and parts, read and checked; no numerics."""
