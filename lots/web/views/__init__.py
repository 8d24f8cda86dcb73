"""Views: policy, fetch, form, one recorder, redirect."""
