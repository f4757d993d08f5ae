import { readFileSync } from 'node:fs';
import { readScan, reduce } from './packages/core/src/evidence/index.js';
import { readStructure } from './packages/core/src/structure/index.js';
import { dataVector } from './packages/core/src/judgement/data-vector.js';
import { prepareTrial } from './packages/core/src/judgement/trial.js';
import { trialModel } from './packages/core/src/judgement/trial-model.js';
import { minimise } from './packages/core/src/judgement/minimise.js';
import { chiSquaredAbove } from './packages/core/src/numerics/chi-squared.js';
import { COPPER, CHROMIA, SPHALERITE, cifOf } from './test/support/measured.js';
const M='/work/shared/measured/';
const eta = Number(process.argv[2] ?? 0.1);
for (const [s,thermals] of [[COPPER,['debye','springs']],[CHROMIA,['debye','springs']],[SPHALERITE,['debye','springs']]] as const) {
  const red = reduce([readScan(readFileSync(M+s.file+'.chi.csv','utf8'))]);
  for (const thermal of thermals) for (const rhi of [s.r[1], 4]) {
    const t0=performance.now();
    const kHi = Math.min(s.kMax, Math.floor(red.noise.kMaxUseful/0.05)*0.05);
    const v = dataVector(red,{kRange:[3,kHi],rRange:[s.r[0],rhi],kWeight:3},eta,s.file);
    const t1=performance.now();
    const clock={now:()=>performance.now(),atoms:0,potentials:0,phases:0,paths:0};
    const trial = prepareTrial(readStructure(cifOf(s)),[{vector:v,absorber:s.absorber,edge:'K',temperature:s.temperature,file:s.file}],{thermal, debyeTemperature:s.debye},clock);
    const t2=performance.now();
    const m = trialModel(trial.spectra,1);
    const best = minimise(m,new Float64Array(m.parameters));
    const t3=performance.now();
    let d=0,r=0; // R in vector
    const res=new Float64Array(m.size); m.evaluate(best.z,res);
    console.log(s.file,thermal,'R',s.r[0],rhi,'k',kHi,'N',v.independentPoints.toFixed(1),'epsR',v.epsilonR.toFixed(3),'floor',v.floorR.toFixed(3),'X',best.x.toFixed(1),'data',best.xData.toFixed(1),'prior',best.xPrior.toFixed(1),'p',chiSquaredAbove(best.x,v.independentPoints).toFixed(3),'it',best.iterations,'P',m.parameters,'paths',trial.spectra[0].sites[0].signal.paths.length,'ms',[t1-t0,t2-t1,t3-t2].map(x=>x.toFixed(0)).join('/'));
    console.log('   ',m.list.map((p,i)=>`${p.name} ${p.shell} ${p.value(best.z[i]).toPrecision(3)} (${best.z[i].toFixed(1)})`).join('; '));
  }
}
