/** The style of the page. */
export const PAGE_STYLE = `
:root{--ground:#f4f6f8;--sheet:#fff;--ink:#16202b;--quiet:#4d5b69;--rule:#c3cdd5;--accent:#7a1f6b;--on-accent:#fff;--error:#a3142e;color-scheme:light}
:root[data-theme=dark]{--ground:#0b1219;--sheet:#131d27;--ink:#e8eef3;--quiet:#a6b4c1;--rule:#324252;--accent:#f59a6b;--on-accent:#16202b;--error:#ff9aa8;color-scheme:dark}
*{box-sizing:border-box}
html{-webkit-text-size-adjust:100%}
body{margin:0;background:var(--ground);color:var(--ink);font:16px/1.45 'Source Sans 3','Source Sans Pro','Segoe UI',Roboto,'Helvetica Neue',Arial,sans-serif}
#app{max-width:1500px;margin:0 auto;padding:18px 24px 32px}
header{display:flex;flex-wrap:wrap;justify-content:space-between;align-items:flex-end;gap:10px 24px}
h1{font-size:34px;line-height:1.1;margin:0;font-weight:650;overflow-wrap:anywhere;letter-spacing:-.01em}
header p{margin:4px 0 0;color:var(--quiet)}
.tools{display:flex;gap:8px}
h2,legend{font-size:15px;font-weight:650;margin:0 0 6px;padding:0;color:var(--ink)}
.caution{margin:10px 0 14px;padding-left:12px;border-left:3px solid var(--accent);max-width:110ch;font-size:15px}
main{display:grid;grid-template-columns:minmax(0,1fr) 330px;gap:24px;align-items:start}
.frame{position:relative;height:min(66vh,760px);min-height:360px;border:1px solid var(--ink);background:var(--sheet);overflow:hidden}
.frame canvas{position:absolute;inset:0;width:100%;height:100%;display:block}
#map{touch-action:none;cursor:crosshair}
#cross{pointer-events:none}
button{font:inherit;color:var(--ink);background:var(--sheet);border:1px solid var(--rule);border-radius:6px;padding:7px 13px;min-height:40px;cursor:pointer}
button:hover{border-color:var(--ink)}
button[aria-pressed=true]{background:var(--accent);border-color:var(--accent);color:var(--on-accent)}
:focus-visible{outline:3px solid var(--accent);outline-offset:2px}
#map:focus-visible{outline-offset:-4px}
.zoom{position:absolute;right:10px;top:10px;display:grid;gap:6px}
.zoom button{width:40px;height:40px;padding:0;font-size:20px;line-height:1}
.keys{position:absolute;width:1px;height:1px;overflow:hidden;clip-path:inset(50%);margin:0}
.sheet:has(#map:focus-visible) .keys{position:static;width:auto;height:auto;clip-path:none;color:var(--quiet);font-size:14px;margin:6px 0 0}
.ruler{display:grid;grid-template-columns:auto minmax(0,1fr) auto;gap:10px;align-items:center;margin-top:12px}
#play{min-width:78px}
.lane{height:78px;position:relative}
#ruler{width:100%;height:100%;display:block;cursor:ew-resize;touch-action:none;border-radius:4px}
.moment{margin:6px 0 10px;color:var(--quiet);min-height:1.45em}
.legend{display:flex;flex-wrap:wrap;align-items:flex-start;row-gap:6px;font-size:14px}
.legend .title{flex-basis:100%}
.legend .step{flex:1 1 0;min-width:42px;max-width:110px}
.legend i{display:block;height:16px;border:1px solid var(--rule);border-left-width:0}
.legend .step:nth-child(2) i{border-left-width:1px}
.legend b{font-weight:600}
.legend small{display:block;color:var(--quiet);font-size:14px}
aside{display:grid;gap:20px;grid-column:2;grid-row:1/span 2}
.sheet{grid-column:1}
.bench{grid-column:1;display:grid;grid-template-columns:repeat(auto-fit,minmax(280px,1fr));gap:24px 32px;align-items:start;border-top:1px solid var(--rule);padding-top:18px}
fieldset{border:0;margin:0;padding:0;min-width:0}
fieldset label{display:flex;gap:8px;align-items:center;padding:4px 0;min-height:32px;overflow-wrap:anywhere}
input[type=radio],input[type=checkbox],input[type=range]{accent-color:var(--accent);flex:none;width:18px;height:18px;margin:0}
input[type=range]{flex:1;width:auto;min-width:0}
fieldset .swatch{width:22px;height:14px;border:1px solid var(--rule);flex:none}
fieldset .area{margin-left:auto;color:var(--quiet);white-space:nowrap}
.figure{margin:0;font-size:15px;color:var(--quiet)}
.figure strong{font-size:30px;font-weight:650;color:var(--ink);margin-right:4px}
.strongest p{margin:0 0 6px}
dl{display:grid;grid-template-columns:auto 1fr;gap:2px 14px;margin:0;min-height:172px;align-content:start}
dt{color:var(--quiet)}
dd{margin:0;font-variant-numeric:tabular-nums}
.place{display:grid;grid-template-columns:1fr 1fr auto;gap:8px;align-items:end;margin-top:8px}
.place label{font-size:14px;color:var(--quiet);min-width:0}
.place input{font:inherit;width:100%;min-height:40px;padding:4px 8px;border:1px solid var(--rule);border-radius:6px;background:var(--sheet);color:var(--ink)}
.place input::placeholder{color:var(--quiet);font-size:13px}
.place button{padding:7px 10px}
.error{color:var(--error);margin:6px 0 0;min-height:0}
#cut{width:100%;height:190px;display:block}
#cut-time{font-weight:400;color:var(--quiet)}
.range{display:flex;align-items:center;gap:10px}
.own-list{display:flex;flex-wrap:wrap;gap:6px}
.own-list button{padding:4px 10px;min-height:36px;overflow-wrap:anywhere}
.about{font-size:14px;color:var(--quiet)}
.about p,.about ul{margin:0 0 6px}
.about ul{padding-left:18px}
.print-map{display:none}
@media (max-width:900px){
#app{padding:14px 14px 28px}
h1{font-size:28px}
main{grid-template-columns:minmax(0,1fr);gap:18px}
aside,.sheet,.bench{grid-column:1;grid-row:auto}
.frame{height:56vh;min-height:320px}
.ruler{grid-template-columns:1fr 1fr}
.lane{grid-column:1/-1;grid-row:1}
.caution{font-size:14px}
}
@media (prefers-reduced-motion:no-preference){button{transition:border-color .15s}}
@media print{#app{display:none}.print-map{display:block}.print-map svg{width:100%;height:auto;max-height:98vh}body{background:#fff}@page{margin:10mm}}
`;
