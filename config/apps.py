"""The app by which Django finds the commands about the program itself."""

from django.apps import AppConfig


class Program(AppConfig):
    """Ferrule's own settings and commands; it comes first, so its `test` stands in for Django's."""

    name = "config"
