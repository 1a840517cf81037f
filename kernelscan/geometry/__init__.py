"""Planar geometry for rooms: numbers in, numbers out, and nothing about buildings, files or screens."""
