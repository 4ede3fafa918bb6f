/** People of the demo shops: invented, and public by design. @type {{ role: string, email: string, password: string }[]} */
export const demoSignIns = [
  { role: 'mixer', email: 'mixer@siltlane.example.test', password: 'stir before you pour' },
  { role: 'operator', email: 'operator@siltlane.example.test', password: 'flood then print' },
  { role: 'planner', email: 'planner@siltlane.example.test', password: 'due on thursday' },
  { role: 'manager', email: 'manager@siltlane.example.test', password: 'count every bucket' },
  { role: 'owner', email: 'owner@siltlane.example.test', password: 'lights out at six' },
  { role: 'mixer of the second shop', email: 'mixer@gorsegate.example.test', password: 'another ink room' },
];
