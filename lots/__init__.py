"""The lot book: one app whose packages are its floors."""
