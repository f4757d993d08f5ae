import { readFileSync } from 'node:fs';
import { readScan, reduce } from './packages/core/src/evidence/index.js';
for (const f of ['cr2o3-100K-scan1.xdi','zns-295K-scan1.xdi','cu-foil-10K.xdi']) {
const r = reduce([readScan(readFileSync('/work/shared/measured/'+f,'utf8'))]);
// derivative profile
const e=r.energyEv, mu=r.mu; let out='';
const pre=r.preEdge.curve, step=r.edgeStep;
for (let i=2;i<e.length-2;i++) { if (e[i]<r.e0-25||e[i]>r.e0+15) continue; const d=(mu[i+1]-mu[i-1])/(e[i+1]-e[i-1])/step; out+=`${(e[i]-r.e0).toFixed(1)}:${((mu[i]-pre[i])/step).toFixed(2)}/${(d*100).toFixed(1)} `; }
console.log(f,r.e0, step, '\n', out);
}
