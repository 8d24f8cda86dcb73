"""Addresses of the book."""

urlpatterns: list = []
