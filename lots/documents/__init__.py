"""Packets and papers: rendering only, from plain data."""
