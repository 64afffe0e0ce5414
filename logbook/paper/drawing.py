"""From a finished page of HTML to a PDF: tagged, PDF/A-3a and built to PDF/UA-1, the same bytes for the same page.

Imported only where a sheet is drawn, for it brings WeasyPrint with it.
"""

import logging
from functools import cache
from threading import Lock

from weasyprint import CSS, HTML
from weasyprint.document import Document
from weasyprint.text.fonts import FontConfiguration

from .closed import HERE, ClosedFetcher

PAPERS = ("A4", "Letter")
ONE_AT_A_TIME = Lock()  # Pango's fonts are not made for several threads

# What WeasyPrint leaves out where the page is PDF/A as well: that it is built to PDF/UA, and, since PDF/A knows no
# such field, what the field means. Source: PDF/UA-1 (ISO 14289-1) clause 5, PDF/A-3 (ISO 19005-3) 6.6.2.3, from memory.
UA = b"""<rdf:Description xmlns:pdfuaid="http://www.aiim.org/pdfua/ns/id/" rdf:about="" pdfuaid:part="1"/>
<rdf:Description xmlns:pdfaExtension="http://www.aiim.org/pdfa/ns/extension/"
 xmlns:pdfaSchema="http://www.aiim.org/pdfa/ns/schema#" xmlns:pdfaProperty="http://www.aiim.org/pdfa/ns/property#"
 rdf:about=""><pdfaExtension:schemas><rdf:Bag><rdf:li rdf:parseType="Resource">
<pdfaSchema:schema>PDF/UA identification schema</pdfaSchema:schema>
<pdfaSchema:namespaceURI>http://www.aiim.org/pdfua/ns/id/</pdfaSchema:namespaceURI>
<pdfaSchema:prefix>pdfuaid</pdfaSchema:prefix>
<pdfaSchema:property><rdf:Seq><rdf:li rdf:parseType="Resource"><pdfaProperty:name>part</pdfaProperty:name>
<pdfaProperty:valueType>Integer</pdfaProperty:valueType><pdfaProperty:category>internal</pdfaProperty:category>
<pdfaProperty:description>part of the PDF/UA standard</pdfaProperty:description></rdf:li></rdf:Seq></pdfaSchema:property>
</rdf:li></rdf:Bag></pdfaExtension:schemas></rdf:Description></rdf:RDF>"""


def pdf_of(page: str, *, paper: str, identifier: bytes) -> bytes:
    """Draw a page of HTML on a paper; `identifier` is what the file calls itself, so that it is the same each time."""
    logging.getLogger("weasyprint").setLevel(logging.ERROR)  # of style sheets for screens it would warn at length
    with ONE_AT_A_TIME:
        html = HTML(string=page, base_url=HERE, url_fetcher=ClosedFetcher())
        return html.write_pdf(
            stylesheets=[CSS(string=f"@page {{ size: {paper} }}")],
            font_config=letters(),
            pdf_variant="pdf/a-3a",
            pdf_identifier=identifier,
            finisher=say_built_to_ua,
        )


@cache
def letters() -> FontConfiguration:
    """The letters of every sheet, unpacked once a process: that takes fifty times as long as drawing a page."""
    configuration = FontConfiguration()
    CSS(url=f"{HERE}letters.css", url_fetcher=ClosedFetcher(), font_config=configuration)
    return configuration


def say_built_to_ua(document: Document, pdf: object) -> None:
    """Add to the file's own description that it is built to PDF/UA-1; left uncompressed, for archives to read."""
    (described,) = [one for one in pdf.objects if getattr(one, "extra", {}).get("Type") == "/Metadata"]
    described.stream = [b"".join(described.stream).replace(b"</rdf:RDF>", UA)]
    described.compress = False
