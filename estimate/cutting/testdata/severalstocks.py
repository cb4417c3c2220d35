import random, json, itertools, scipy, numpy as np
from scipy.optimize import milp, LinearConstraint, Bounds
random.seed(20264)
cases=[]
def patterns(S,kerf,ls,ds):
    W=S+kerf; out=[]
    def rec(i,room,cur):
        if i==len(ls):
            if any(cur): out.append(tuple(cur))
            return
        for n in range(min(ds[i],room//(ls[i]+kerf))+1):
            rec(i+1,room-n*(ls[i]+kerf),cur+[n])
    rec(0,W,[])
    return out
while len(cases)<12:
    k=len(cases)
    stock=sorted(random.sample([60000,80000,100000,120000,121000,151000],random.randint(2,4)))
    kerf=random.choice([0,25,40,60])
    m=random.randint(4,7)
    ls=sorted(random.sample(range(12000,max(stock)//1,5),m),reverse=True)
    ds=[random.randint(1,25) for _ in ls]
    obj=["length","bars","cost"][k%3]
    cost=[s//10*random.randint(80,125)//100 for s in stock] if obj=="cost" else [0]*len(stock)
    av=[random.choice([0,0,random.randint(2,30)]) for _ in stock] if k%2 else [0]*len(stock)
    price={"length":stock,"bars":[1]*len(stock),"cost":cost}[obj]
    cols=[(s,p) for s in range(len(stock)) for p in patterns(stock[s],kerf,ls,ds)]
    if len(cols)>20000: continue
    A=np.array([p for _,p in cols]).T
    cons=[LinearConstraint(A,ds,np.inf)]
    for s in range(len(stock)):
        if av[s]: cons.append(LinearConstraint([1 if c[0]==s else 0 for c in cols],0,av[s]))
    r=milp([price[c[0]] for c in cols],constraints=cons,integrality=np.ones(len(cols)),bounds=Bounds(0,np.inf),options={"mip_rel_gap":0,"time_limit":60})
    if r.status!=0: print(k,r.status,r.message); continue
    val=round(r.fun)
    print(k,obj,stock,av,val,r.mip_dual_bound)
    cases.append(dict(pieces=[dict(mark=f"P{i+1}",length=l,count=d) for i,(l,d) in enumerate(zip(ls,ds))],
      stock=[dict(length=s,cost=c,available=a) for s,c,a in zip(stock,cost,av)],kerf=kerf,objective=obj,optimum=val))
with open("severalstocks.json","w") as f:
    f.write('{"source":"scipy.optimize.milp (HiGHS), SciPy %s, all patterns enumerated, gap 0; lengths in 0.1 mm","cases":[\n'%scipy.__version__+",\n".join(json.dumps(c) for c in cases)+"\n]}\n")
