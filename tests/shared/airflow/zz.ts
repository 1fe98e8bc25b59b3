import { questionOfCheck } from '../../../shared/check/rigOfCheck.ts'
import { limitBorePrepared } from '../../../shared/airflow/limitBore.ts'
import { requireTarget } from '../../../shared/airflow/pressureCheck.ts'
import { findBalance } from '../../../shared/airflow/balance.ts'
import { prepareRig } from '../../../shared/airflow/preparedRig.ts'
import { answerCheck } from '../../../shared/check/answerCheck.ts'
import { checkPrepared } from '../../../shared/airflow/pressureCheck.ts'
import * as fs from 'node:fs'
const bodies = JSON.parse(fs.readFileSync('/tmp/x/bodies.json','utf8'))
const cpu=(f:any)=>{ f(); const a=process.cpuUsage(); f(); const b=process.cpuUsage(a); return (b.user)/1000 }
for (const body of bodies) {
 const q=questionOfCheck(body); const p=prepareRig(q.rig,q.site); const tg=q.targetPa-q.ambientPa
 console.log('answer',cpu(()=>answerCheck(body)),'check',cpu(()=>checkPrepared(p,tg)),'req', cpu(()=>requireTarget(p,tg)),'limit',cpu(()=>limitBorePrepared(p,tg,0)))
}
{ const body=bodies[0]; const q=questionOfCheck(body);const tg=q.targetPa-q.ambientPa
 const lim=limitBorePrepared(prepareRig(q.rig,q.site),tg,0).boreM!
 for (const f of [0.5,0.9,0.9999,1-1e-6,1+1e-12,1+1e-9,1+1e-6,1.001,1.1,2]) { const b=JSON.parse(JSON.stringify(body)); b.outlets[0].nozzle.boreMm=lim*1000*f; const qq=questionOfCheck(b); const p=prepareRig(qq.rig,qq.site); let r:any; const t=cpu(()=>{r=requireTarget(p,tg,false)}); let bal:any; const t2=cpu(()=>{bal=findBalance(p)}); console.log(f,r.excess,r.reason,t,'bal',t2,bal.marches,bal.tightness) }
}
{
 const body=bodies[4]; const q=questionOfCheck(body); const p=prepareRig(q.rig,q.site)
 ;(globalThis as any).trace=[]
 limitBorePrepared(p,q.targetPa-q.ambientPa,0)
 for (const t of (globalThis as any).trace) console.log(t)
}
