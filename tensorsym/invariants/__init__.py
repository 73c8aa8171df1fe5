"""The exact solver: a group and a kind of tensor in, the allowed components and a certificate out."""
