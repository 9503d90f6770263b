"""Views of answers: they compute nothing and decide nothing."""
