"""Kinds of tensors, the laws that define them, changes of axes and matrix notation."""
