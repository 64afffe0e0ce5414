"""A refusal: what a service says when it won't, in a sentence fit for the person who asked."""


class Refused(Exception):
    """Something asked for that can't be done now; its text says what was asked, what stands against it, what to do."""
