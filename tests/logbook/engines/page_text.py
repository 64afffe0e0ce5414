"""A page as its reader has it: its words, its links, its one heading."""

from html.parser import HTMLParser


class Text(HTMLParser):
    """The words of a page, and its links."""

    def __init__(self) -> None:
        super().__init__()
        self.words, self.links, self.headings = [], [], 0

    def handle_starttag(self, tag, attrs):
        told = dict(attrs)
        self.headings += tag == "h1"
        if tag == "a":
            self.links.append(told["href"])
        if tag == "form" and told.get("method") == "post" and told.get("action"):
            self.links.append(told["action"])

    def handle_data(self, data):
        self.words.append(data)


def read(response) -> Text:
    page = Text()
    page.feed(response.content.decode())
    page.text = " ".join(" ".join(page.words).split())
    return page
