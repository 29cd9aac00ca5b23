import {run} from "@/scripts/bench/fits"; run().then(r=>console.log(r[0].value));
import { fitResonance } from "@/lib/numerics/resonance/fit-resonance";
import { bentPower } from "@/lib/numerics/resonance/bent-model";
import { linearGrid } from "@/lib/numerics/resonance/types";
import { xoroshiro128plus } from "pure-rand";
const rng = xoroshiro128plus(5);
const u = () => ((rng.unsafeNext()>>>5)*67108864+(rng.unsafeNext()>>>6)+0.5)/9007199254740992;
const g=()=>Math.sqrt(-2*Math.log(u()))*Math.cos(2*Math.PI*u());
for(const k of [0,0.05,0.1,0.12,0.15,0.2,0.4,0.8,1.5,2.5,4,-0.2,-1,-3]) for (const [snr,desc] of [[100,false],[1000,true]] as const){
 let bent=0,dist=0,fail=0,none=0,edge=0,ev=0;
 for(let r=0;r<100;r++){
  const f=linearGrid(988+3*u(),1008+3*u(),201); if(desc) f.reverse();
  const re=new Float64Array(201),im=new Float64Array(201); let near=.5;
  for(let i=0;i<201;i++){const x=200*(f[i]/1000-1000/f[i]),w=1000/f[i];const P=bentPower(x,k*w**3,near);near=P;const X=x-k*w**3*P;re[i]=P+g()/snr;im[i]=-X*P+g()/snr;}
  const fit=fitResonance({kind:"complex",frequencyHz:f,re,im},{readout:"velocity"});
  if(fit.flags.includes("bent"))bent++; if(fit.flags.includes("distorted"))dist++; if(fit.flags.includes("failed"))fail++;if(fit.flags.includes("edge"))edge++; if(!fit.flags.length)none++; ev=Math.max(ev,fit.evaluations);
 }
 console.log({k,snr,bent,dist,fail,edge,none,ev});
}
