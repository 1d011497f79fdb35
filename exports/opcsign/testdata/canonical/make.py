#!/usr/bin/python3
"""Makes the corpus of the canonical form: NAME.xml, and what libxml2 makes of it.

NAME.doc is the whole document, NAME.sub the subtree of the element whose attribute Id is "x" with all its attribute
and namespace nodes (the node set of a same-document reference), both Canonical XML 1.0 without comments.
The same for whole documents without comments: xmllint --c14n NAME.xml > NAME.doc
usage: /usr/bin/python3 make.py   (needs libxml2)
"""
import ctypes, ctypes.util, os

x = ctypes.CDLL(ctypes.util.find_library("xml2"))
for f in ("xmlReadFile", "xmlXPathNewContext", "xmlXPathEvalExpression"):
    getattr(x, f).restype = ctypes.c_void_p
x.xmlReadFile.argtypes = [ctypes.c_char_p, ctypes.c_char_p, ctypes.c_int]
x.xmlXPathNewContext.argtypes = [ctypes.c_void_p]
x.xmlXPathEvalExpression.argtypes = [ctypes.c_char_p, ctypes.c_void_p]
x.xmlC14NDocDumpMemory.argtypes = [ctypes.c_void_p, ctypes.c_void_p, ctypes.c_int, ctypes.c_void_p, ctypes.c_int, ctypes.POINTER(ctypes.c_void_p)]


class XPathObject(ctypes.Structure):  # the head of xmlXPathObject
    _fields_ = [("type", ctypes.c_int), ("nodesetval", ctypes.c_void_p)]


def c14n(doc, nodes):
    out = ctypes.c_void_p()
    n = x.xmlC14NDocDumpMemory(doc, nodes, 0, None, 0, ctypes.byref(out))
    assert n >= 0
    return ctypes.string_at(out, n)


CASES = {
    "order": '<a z="1" a="2" xmlns:q="u:q" xmlns:b="u:b" q:a="3" b:z="4" B="5"><Q/></a>',
    "empty": '<?xml version="1.0"?>\n<a  ><b></b><c/>  </a>\n',
    "quotes": "<a b='\"' c=\"'\" d='&lt;&gt;&amp;&quot;&apos;' Id='x'>&lt;&gt;&amp;&quot;&apos;\" '</a>",
    "breaks": '<a b="1\n2\t3&#10;4&#9;5&#13;6" Id="x">1\r\n2\r3&#13;4&#10;5&#9;6</a>',
    "cdata": '<a Id="x">1<![CDATA[<&>]]>2<![CDATA[]]></a>',
    "aside": '<?p  q?><!-- 1 --><a Id="x"><!-- 2 --><?r?>t<!-- 3 -->u<?s  t ?></a><!-- 4 --><?v w?>',
    "default": '<a xmlns="u:1"><b xmlns="u:2" Id="x"><c xmlns=""/><d xmlns="u:2"/></b></a>',
    "prefix": '<p:a xmlns:p="u:1"><p:b xmlns:p="u:2" Id="x"><p:c xmlns:p="u:2"/><p:d xmlns:p="u:1"/></p:b></p:a>',
    "unused": '<a xmlns:u="u:u" xmlns="u:1"><b Id="x"><c xmlns:u="u:v"><d xmlns:u="u:u"/></c></b></a>',
    "undefault": '<a xmlns="u:1"><b xmlns="" Id="x"><c/><d xmlns="u:1"/></b></a>',
    "nodefault": '<a xmlns=""><b Id="x" xmlns=""><c/></b></a>',
    "inherit": '<a xml:lang="de" xml:space="preserve"><b xml:lang="en"><c Id="x" q="1"/></b></a>',
    "inheritown": '<a xml:lang="de" xml:space="preserve"><b Id="x" xml:lang="fr"><c xml:lang="en"/></b></a>',
    "xmlprefix": '<a xmlns:xml="http://www.w3.org/XML/1998/namespace"><b Id="x" xml:base="http://e.org/"/></a>',
    "unicode": '<a Id="x" e="ü">ö&#x20AC;&#x1F600;\U0001F600\u00a0\u2028</a>',
    "samelocal": '<a xmlns:p="u:2" xmlns:q="u:1" p:i="1" q:i="2" i="3" Id="x"/>',
    "deep": '<a xmlns:a="u:a"><a:b xmlns:b="u:b"><b:c xmlns:c="u:c" Id="x"><a:d/><c:e b:f="1" a:f="2"/></b:c></a:b></a>',
    "reference": '<Signature xmlns="http://www.w3.org/2000/09/xmldsig#" Id="s"><SignedInfo Id="x">\n <Reference URI="#a"/>\n</SignedInfo></Signature>',
    "mixed": '<a Id="x"> \n <b> t </b>\n\tu<c\n  d = "e"\n/> </a >',
    "bom": '\ufeff<?xml version="1.0" encoding="UTF-8" standalone="yes"?>\r\n<a Id="x">\r\n</a>\r\n',
    "empties": '<a b="" xmlns:c="u:c" c:d="" Id="x"><e f=""></e></a>',
}

os.chdir(os.path.dirname(os.path.abspath(__file__)))
for name, text in CASES.items():
    with open(name + ".xml", "wb") as f:
        f.write(text.encode())
    doc = x.xmlReadFile((name + ".xml").encode(), None, 2)  # XML_PARSE_NOENT: references are replaced
    assert doc, name
    with open(name + ".doc", "wb") as f:
        f.write(c14n(doc, None))
    if 'Id="x"' in text or "Id='x'" in text:
        ctx = x.xmlXPathNewContext(doc)
        obj = x.xmlXPathEvalExpression(b"//*[@Id='x']/descendant-or-self::node() | //*[@Id='x']/descendant-or-self::*/@* | //*[@Id='x']/descendant-or-self::*/namespace::*", ctx)
        nodes = ctypes.cast(obj, ctypes.POINTER(XPathObject)).contents.nodesetval
        with open(name + ".sub", "wb") as f:
            f.write(c14n(doc, nodes))
