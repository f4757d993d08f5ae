import { readFileSync } from 'node:fs';
import { readScan, reduce } from './packages/core/src/evidence/index.js';
import { readStructure } from './packages/core/src/structure/index.js';
import { judge } from './packages/core/src/judgement/index.js';
import { COPPER, CHROMIA, SPHALERITE, cifOf, type Standard } from './test/support/measured.js';
const M='/work/shared/measured/';
const eta = Number(process.argv[2] ?? 0.1);
const scaled=(s:Standard,f:number):Standard=>({...s,cell:s.cell.map((c,i)=>i<3?c*f:c)});
const swapped=(s:Standard,from:string,to:string):Standard=>({...s,atoms:s.atoms.map(a=>{const p=a.split(' ');return p[1]===from?`${to}1 ${to} ${p.slice(2).join(' ')}`:a})});
for (const s of [COPPER,CHROMIA,SPHALERITE]) {
  const raw = {'cu-foil-10K':['cu-foil-10K.xdi'],'cr2o3-100K':[1,2,3].map(i=>`cr2o3-100K-scan${i}.xdi`),'zns-295K':[1,2,3].map(i=>`zns-295K-scan${i}.xdi`)}[s.file]!;
  const red = reduce(raw.map(f=>readScan(readFileSync(M+f,'utf8'))));
  const variants:[string,Standard][] = [['true',s],['+1.5%',scaled(s,1.015)],['-1.5%',scaled(s,0.985)]];
  if (s===CHROMIA) variants.push(['O->S',swapped(s,'O','S')]);
  if (s===SPHALERITE) variants.push(['S->O',swapped(s,'S','O')]);
  const cands = variants.map(([n,v])=>({file:n,structure:readStructure(cifOf(v))}));
  const j = judge(cands,[{file:s.file,reduction:red,absorber:s.absorber,temperature:s.temperature,...(process.argv[3]==='first'?{rRange:s.r}:{})}],{debyeTemperature:s.debye,modelError:eta,rivals:process.argv[4]==='rivals'},{version:'0',now:()=>performance.now()/1000});
  console.log(s.file,JSON.stringify(j.evidence[0]),JSON.stringify(j.timing));
  for (const c of j.candidates) { console.log(' ',c.file,c.finding,'X',c.x.toFixed(1),'(',c.xData.toFixed(1),c.xPrior.toFixed(1),') N',c.independentPoints.toFixed(1),'p',c.p.toExponential(1),'R',c.rFactor.toFixed(4),'power',c.power.toFixed(2),c.posterior.method,c.posterior.reason,'lnZ',c.logEvidence.toFixed(1), '| stretch',c.overlength.stretch.value.toFixed(4),'±',c.overlength.stretch.sd.toFixed(4),c.overlength.verdict, c.overlength.shells.map(x=>`${x.label} ${x.structureDistance.toFixed(3)} ${x.deltaR.toFixed(3)}±${x.sd.toFixed(3)}`).join('; '), c.strained.join('; '));
   console.log('     ',c.overlength.sentence, c.disorder.map(d=>`${d.label} N${d.count.toFixed(1)} th ${d.thermal.toFixed(4)} st ${d.static.toFixed(4)} want ${d.wanted.toFixed(4)}`).join('; '));
   for (const r of c.rivals) console.log('        rival',r.label,r.x.toFixed(1),r.p.toExponential(1),r.logEvidence.toFixed(1),r.excluded);
  }
}
