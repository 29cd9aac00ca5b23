import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { circleGuess, gridGuess } from "@/lib/numerics/resonance/first-guess";
import { prepareSweep } from "@/lib/numerics/resonance/prepare";
import { cramerRaoBound } from "@/lib/numerics/resonance/cramer-rao";
import { evaluateResonance } from "@/lib/numerics/resonance/model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { xoroshiro128plus } from "pure-rand";
void prepareSweep; void circleGuess; void gridGuess;
const rng = xoroshiro128plus(12345);
const u = () => ((rng.unsafeNext()>>>5)*67108864+(rng.unsafeNext()>>>6)+0.5)/9007199254740992;
let spare: number|undefined;
const g = () => { if (spare!==undefined){const v=spare; spare=undefined; return v;} const r=Math.sqrt(-2*Math.log(1-u())), t=2*Math.PI*u(); spare=r*Math.sin(t); return r*Math.cos(t); };
const M = +(process.argv[2] ?? 2000);
const zf:number[]=[],zq:number[]=[],zlq:number[]=[],rel:number[]=[],ef:number[]=[],eq:number[]=[],ev:number[]=[];
let fails=0, big=0; const bad:unknown[]=[]; const flags:Record<string,number>={};
let time=0;
for (let k=0;k<M;k++){
  const n = 51+Math.floor(u()*751);
  const snr = (n<100?20:10)*Math.pow(100, u()*u());
  const q = 3*Math.pow(1e5/3,u());
  const f0=Math.pow(10,2+3*u());
  let span:number, frac:number, start:number;
  do { span=(4+16*u())*f0/(2*q); frac=0.25+0.5*u(); start=f0-frac*span; } while(start<f0/4);
  const f=linearGrid(start,start+span,n);
  const ph=2*Math.PI*u(), A=Math.pow(10,-3+6*u());
  const off=u()*100*A, op=2*Math.PI*u(), sl=u()*u()*10*A, sp=2*Math.PI*u();
  const readout = u()<0.5?"velocity":"displacement";
  const a={re:A*Math.cos(ph),im:A*Math.sin(ph)};
  const z=evaluateResonance(f,{readout,f0Hz:f0,q,a,b:{re:off*Math.cos(op),im:off*Math.sin(op)},c:{re:sl*Math.cos(sp),im:sl*Math.sin(sp)}});
  const noise=A/snr;
  for(let i=0;i<n;i++){z.re[i]+=noise*g();z.im[i]+=noise*g();}
  const b=cramerRaoBound({frequencyHz:f,readout,f0Hz:f0,q,a,noise});
  const t0=performance.now();
  const r=fitResonance({kind:"complex",frequencyHz:f,...z},{readout});
  time+=performance.now()-t0;
  for(const x of r.flags) flags[x]=(flags[x]??0)+1;
  ev.push(r.evaluations);
  if(r.flags.includes("failed")){fails++; bad.push(["failed",{n,snr,q,f0,span:span/(f0/2/q),frac,readout,rq:b.qStd/q,ev:r.evaluations}]);continue;}
  const df=(r.f0Hz-f0)/b.f0StdHz,dq=(r.q-q)/b.qStd,dl=Math.log(r.q/q)/(b.qStd/q);
  zf.push(df);zq.push(dq);zlq.push(dl);rel.push(b.qStd/q);ef.push((r.f0Hz-f0)/r.f0StdHz);eq.push((r.q-q)/r.qStd);
  if(Math.abs(df)>6||Math.abs(dq)>6){big++;bad.push([df,dq,dl,{n,snr,q,f0,span:span/(f0/2/q),frac,readout,rq:b.qStd/q,ev:r.evaluations,flags:r.flags}]);}
}
const rms=(v:number[])=>Math.sqrt(v.reduce((s,x)=>s+x*x,0)/v.length), mean=(v:number[])=>v.reduce((s,x)=>s+x,0)/v.length;
const srt=[...rel].sort((a,b)=>a-b);
console.log({M,fails,big,flags,us:time/M*1000,evmean:mean(ev),evmax:Math.max(...ev),share30:ev.filter(x=>x>30).length});
console.log("rms/bound f0,Q,lnQ",rms(zf),rms(zq),rms(zlq),"err/reported",rms(ef),rms(eq),"mean",mean(zf),mean(zq.filter((_,i)=>rel[i]<.05)));
console.log("rel Q quant",srt[Math.floor(.5*srt.length)],srt[Math.floor(.9*srt.length)],srt[Math.floor(.99*srt.length)],srt.at(-1));
for(const [lo,hi] of [[0,.02],[.02,.05],[.05,.1],[.1,.2],[.2,9]]){const s=(v:number[])=>v.filter((_,i)=>rel[i]>=lo&&rel[i]<hi);console.log(lo,hi,s(zf).length,rms(s(zf)),rms(s(zq)),rms(s(zlq)),rms(s(ef)),rms(s(eq)),mean(s(zq)));}
console.log(JSON.stringify(bad.slice(0,12),null,0));
