"""Addresses: all of them are the lot book's."""

from django.urls import include, path

urlpatterns = [path("", include("lots.web.urls"))]
