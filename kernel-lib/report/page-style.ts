/** Look of a report: light or dark as the reader's system, quiet code, on paper without what only a screen needs. */
export const PAGE_STYLE: string = `
:root{color-scheme:light dark;--paper:#fff;--ink:#1d2127;--faint:#5c6570;--line:#d9dee4;--wash:#f4f6f8;--link:#1f5fbf;--bad:#a3182f;--bad-wash:#fdf0f1;--warn:#8a5a00;--warn-wash:#fdf6e7}
@media (prefers-color-scheme:dark){:root{--paper:#15181c;--ink:#e4e7eb;--faint:#9aa4af;--line:#343b44;--wash:#1e2329;--link:#7fb0ff;--bad:#ff8f9f;--bad-wash:#31191d;--warn:#e8b65a;--warn-wash:#2c2414}}
*{box-sizing:border-box}
body{margin:0;background:var(--paper);color:var(--ink);font:16px/1.55 system-ui,'Segoe UI',Helvetica,Arial,'DejaVu Sans',sans-serif}
header,main,footer{max-width:64rem;margin:0 auto;padding:0 1.5rem}
header{padding-top:2.2rem}
h1{font-size:1.9rem;line-height:1.2;margin:0 0 1rem}
h2{font-size:1.35rem;margin:2.4rem 0 .6rem;padding-top:.8rem;border-top:1px solid var(--line)}
h3{font-size:1.1rem;margin:1.6rem 0 .4rem}
p,ul,ol{max-width:46rem}
a{color:var(--link)}
.result{border-left:4px solid var(--link);background:var(--wash);padding:.8rem 1.1rem;margin:1rem 0}
.result h2{font-size:1rem;margin:0 0 .3rem;padding:0;border:0;color:var(--faint)}
.result ul{margin:0;padding-left:1.1rem;font-size:1.05rem}
.result p{margin:.3rem 0 0;color:var(--faint);font-size:.9rem}
.facts{color:var(--faint);font-size:.9rem;margin:.6rem 0}
.failed{border-left:4px solid var(--bad);background:var(--bad-wash);color:var(--bad);padding:.6rem 1.1rem;max-width:none}
nav{font-size:.95rem}nav ol{margin:.3rem 0;padding-left:1.4rem}
details.code{margin:.7rem 0 .4rem}
summary{color:var(--faint);font-size:.85rem;cursor:pointer;width:max-content}
pre{font:13px/1.45 ui-monospace,'SF Mono',Menlo,Consolas,'DejaVu Sans Mono',monospace;overflow-x:auto;margin:.4rem 0;white-space:pre-wrap;overflow-wrap:anywhere}
code{font-family:ui-monospace,'SF Mono',Menlo,Consolas,'DejaVu Sans Mono',monospace;font-size:.9em}
details.code pre,main p code,main li code,pre>code{background:var(--wash);border-radius:3px}
details.code pre{padding:.7rem .9rem}
main p code,main li code{padding:.1em .3em}
.output{margin:.5rem 0;overflow-x:auto;max-width:100%}
.output img{max-width:100%;height:auto}
:where([data-fig]>img){display:block}
.output.error{border-left:4px solid var(--bad);background:var(--bad-wash);padding:.6rem .9rem}
.output.warning{border-left:4px solid var(--warn);background:var(--warn-wash);padding:.6rem .9rem}
table{border-collapse:collapse;font-size:.9rem;font-variant-numeric:tabular-nums}
th,td{border-bottom:1px solid var(--line);padding:3px 10px;text-align:left}
thead th{border-bottom:2px solid var(--line)}
caption{color:var(--faint);padding:4px 0}
math{font-family:'STIX Two Math','Cambria Math','Latin Modern Math','DejaVu Math TeX Gyre',math}
math[display=block]{margin:.6rem 0}
blockquote{margin:.8rem 0;padding-left:1rem;border-left:3px solid var(--line);color:var(--faint)}
footer{color:var(--faint);font-size:.85rem;border-top:1px solid var(--line);margin-top:3rem;padding-top:.8rem;padding-bottom:2rem}
.ansi-bold{font-weight:bold}.ansi-italic{font-style:italic}.ansi-underline{text-decoration:underline}
.ansi-red-fg,.ansi-bright-red-fg{color:var(--bad)}.ansi-yellow-fg,.ansi-bright-yellow-fg{color:var(--warn)}
.ansi-green-fg,.ansi-bright-green-fg{color:light-dark(#1b6e3c,#7ccf98)}
.ansi-blue-fg,.ansi-bright-blue-fg{color:var(--link)}
.ansi-cyan-fg,.ansi-bright-cyan-fg{color:light-dark(#0b6b78,#6fcbd8)}
.ansi-magenta-fg,.ansi-bright-magenta-fg{color:light-dark(#8a2a8a,#dd8fdd)}
.ansi-bright-black-fg{color:var(--faint)}
@page{margin:18mm 16mm}
@media print{
:root{color-scheme:light;--paper:#fff;--ink:#000;--faint:#444;--line:#bbb;--wash:#f4f4f4;--link:#000;--bad:#a3182f;--bad-wash:#fff;--warn:#6b4600;--warn-wash:#fff}
body{font-size:10.5pt}
header,main,footer{max-width:none;padding-left:0;padding-right:0}
details.code:not([open]),nav{display:none}
h1,h2,h3{break-after:avoid}
.output,.result,tr{break-inside:avoid}
}
`.replace(/\n/g, '');
