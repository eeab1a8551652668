"""The site around the reactions app."""

from labbook.celery import application as celery_application

__all__ = ["celery_application"]
