import { test } from 'vitest';
import { compileCondition, compileQuantity } from '#shared/scenario/expression/expression.ts';
test('x', () => {
  const x:any={timeS:3,casMps:40,tasMps:41,heightAboveRunwayM:100,headingRad:1,turnedRad:0,phiRad:-.2,betaRad:.1,rRadS:.1,pRadS:0,pedal:.5,stick:0,rudderRad:0,aileronRad:0,ballWidths:1,vmcMps:35,stallMps:30,sinceS:(id:string)=>id==='cut'?2.5:id==='left-cut'?1:NaN};
  for (const s of ['ias < vmc + 25 kt and since(cut) > 2 s','yaw_rate > 5 deg/s','yaw_rate*2 s > 5 deg','ias > 300 ft/min','pedal > 60 %','pedal > 60% and t < 5 s','pedal>60%-20%','since(left-cut)>0.5 s','since(nope) > 1 s or t > 0 s','not since(nope) > 1 s','not ias > 80 kt','not not ias > 80 kt','ias < 85','bank > 5','min(ias, tas) < 50 m/s','abs(bank) > 5 deg','sqrt(ias*ias) > 3 kt','ias > kt','2 ias > 3 kt','5 ft/s < ias','ias = 3 kt','ias^2 > 4','a.b > 3','t > 3 s; t','"x" == "x"','((((((((((((((((t))))))))))))))))>1 s','(((((((((((((((((t)))))))))))))))))>1 s','- - - - - - - - - - - - - - - - - t > 1 s','ias > 3 kt > 2 kt','t >','(t > 3 s','t > 3 s)','','t','t>3 s and pedal','abs(t,t)>1 s','since() > 1 s','since(cut','1e999 > t','t xor t','ias > 10 min','cos(t) > 1','ias % 3 > 2','constructor > 1','t > 5 s ? 1 : 2','[1]','ball > 0.5 widths','heading > 350 deg','ias - stall < 1.1*stall','5 count > 3','2(3 s) > t','abs > 3', 'bank/5 deg > 1', 't == 3 s', 'ias !=40 m/s','t > 3 s !', 'speed.x', 'min > 3', 'pedal > .5.5']) {
    const r = compileCondition(s);
    console.log(JSON.stringify(s), r.ok ? r.condition.holds(x) : `REFUSED @${r.problem.position} ${r.problem.message} | ${r.problem.remedy.slice(0,80)}`);
  }
  const c=compileCondition('ias < vmc + 25 kt and since(cut) > 2 s'); if(c.ok){ const t0=performance.now(); let n=0; for(let i=0;i<5e6;i++){ if(c.condition.holds(x)) n++;} console.log('ns', (performance.now()-t0)/5e6*1e6); }
  const q=compileQuantity('abs(bank)*2 + since(cut)/1 s * 1 deg'); console.log(q.ok? q.quantity.value(x):q.problem);
});
