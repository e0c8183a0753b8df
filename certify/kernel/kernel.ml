
(** val xorb : bool -> bool -> bool **)

let xorb b1 b2 =
  if b1 then if b2 then false else true else b2

(** val negb : bool -> bool **)

let negb = function
| true -> false
| false -> true

type nat =
| O
| S of nat

(** val option_map : ('a1 -> 'a2) -> 'a1 option -> 'a2 option **)

let option_map f = function
| Some a -> Some (f a)
| None -> None

(** val fst : ('a1 * 'a2) -> 'a1 **)

let fst = function
| (x, _) -> x

(** val snd : ('a1 * 'a2) -> 'a2 **)

let snd = function
| (_, y) -> y

(** val length : 'a1 list -> nat **)

let rec length = function
| [] -> O
| _ :: l' -> S (length l')

(** val app : 'a1 list -> 'a1 list -> 'a1 list **)

let rec app l m =
  match l with
  | [] -> m
  | a :: l1 -> a :: (app l1 m)

type comparison =
| Eq
| Lt
| Gt

(** val compOpp : comparison -> comparison **)

let compOpp = function
| Eq -> Eq
| Lt -> Gt
| Gt -> Lt

module Coq__1 = struct
 (** val add : nat -> nat -> nat **)
 let rec add n m =
   match n with
   | O -> m
   | S p -> S (add p m)
end
include Coq__1

(** val mul : nat -> nat -> nat **)

let rec mul n m =
  match n with
  | O -> O
  | S p -> add m (mul p m)

(** val sub : nat -> nat -> nat **)

let rec sub n m =
  match n with
  | O -> n
  | S k -> (match m with
            | O -> n
            | S l -> sub k l)

(** val eqb : nat -> nat -> bool **)

let rec eqb n m =
  match n with
  | O -> (match m with
          | O -> true
          | S _ -> false)
  | S n' -> (match m with
             | O -> false
             | S m' -> eqb n' m')

type positive =
| XI of positive
| XO of positive
| XH

type z =
| Z0
| Zpos of positive
| Zneg of positive

module Nat =
 struct
  (** val eqb : nat -> nat -> bool **)

  let rec eqb n m =
    match n with
    | O -> (match m with
            | O -> true
            | S _ -> false)
    | S n' -> (match m with
               | O -> false
               | S m' -> eqb n' m')

  (** val leb : nat -> nat -> bool **)

  let rec leb n m =
    match n with
    | O -> true
    | S n' -> (match m with
               | O -> false
               | S m' -> leb n' m')

  (** val ltb : nat -> nat -> bool **)

  let ltb n m =
    leb (S n) m

  (** val even : nat -> bool **)

  let rec even = function
  | O -> true
  | S n0 -> (match n0 with
             | O -> false
             | S n' -> even n')

  (** val odd : nat -> bool **)

  let odd n =
    negb (even n)
 end

module Pos =
 struct
  (** val succ : positive -> positive **)

  let rec succ = function
  | XI p -> XO (succ p)
  | XO p -> XI p
  | XH -> XO XH

  (** val add : positive -> positive -> positive **)

  let rec add x y =
    match x with
    | XI p ->
      (match y with
       | XI q -> XO (add_carry p q)
       | XO q -> XI (add p q)
       | XH -> XO (succ p))
    | XO p ->
      (match y with
       | XI q -> XI (add p q)
       | XO q -> XO (add p q)
       | XH -> XI p)
    | XH -> (match y with
             | XI q -> XO (succ q)
             | XO q -> XI q
             | XH -> XO XH)

  (** val add_carry : positive -> positive -> positive **)

  and add_carry x y =
    match x with
    | XI p ->
      (match y with
       | XI q -> XI (add_carry p q)
       | XO q -> XO (add_carry p q)
       | XH -> XI (succ p))
    | XO p ->
      (match y with
       | XI q -> XO (add_carry p q)
       | XO q -> XI (add p q)
       | XH -> XO (succ p))
    | XH ->
      (match y with
       | XI q -> XI (succ q)
       | XO q -> XO (succ q)
       | XH -> XI XH)

  (** val pred_double : positive -> positive **)

  let rec pred_double = function
  | XI p -> XI (XO p)
  | XO p -> XI (pred_double p)
  | XH -> XH

  (** val pred : positive -> positive **)

  let pred = function
  | XI p -> XO p
  | XO p -> pred_double p
  | XH -> XH

  (** val mul : positive -> positive -> positive **)

  let rec mul x y =
    match x with
    | XI p -> add y (XO (mul p y))
    | XO p -> XO (mul p y)
    | XH -> y

  (** val compare_cont : comparison -> positive -> positive -> comparison **)

  let rec compare_cont r x y =
    match x with
    | XI p ->
      (match y with
       | XI q -> compare_cont r p q
       | XO q -> compare_cont Gt p q
       | XH -> Gt)
    | XO p ->
      (match y with
       | XI q -> compare_cont Lt p q
       | XO q -> compare_cont r p q
       | XH -> Gt)
    | XH -> (match y with
             | XH -> r
             | _ -> Lt)

  (** val compare : positive -> positive -> comparison **)

  let compare =
    compare_cont Eq

  (** val eqb : positive -> positive -> bool **)

  let rec eqb p q =
    match p with
    | XI p0 -> (match q with
                | XI q0 -> eqb p0 q0
                | _ -> false)
    | XO p0 -> (match q with
                | XO q0 -> eqb p0 q0
                | _ -> false)
    | XH -> (match q with
             | XH -> true
             | _ -> false)

  (** val leb : positive -> positive -> bool **)

  let leb x y =
    match compare x y with
    | Gt -> false
    | _ -> true

  (** val ltb : positive -> positive -> bool **)

  let ltb x y =
    match compare x y with
    | Lt -> true
    | _ -> false

  (** val iter_op : ('a1 -> 'a1 -> 'a1) -> positive -> 'a1 -> 'a1 **)

  let rec iter_op op p a =
    match p with
    | XI p0 -> op a (iter_op op p0 (op a a))
    | XO p0 -> iter_op op p0 (op a a)
    | XH -> a

  (** val to_nat : positive -> nat **)

  let to_nat x =
    iter_op Coq__1.add x (S O)

  (** val of_nat : nat -> positive **)

  let rec of_nat = function
  | O -> XH
  | S x -> (match x with
            | O -> XH
            | S _ -> succ (of_nat x))

  (** val of_succ_nat : nat -> positive **)

  let rec of_succ_nat = function
  | O -> XH
  | S x -> succ (of_succ_nat x)
 end

module Z =
 struct
  (** val double : z -> z **)

  let double = function
  | Z0 -> Z0
  | Zpos p -> Zpos (XO p)
  | Zneg p -> Zneg (XO p)

  (** val succ_double : z -> z **)

  let succ_double = function
  | Z0 -> Zpos XH
  | Zpos p -> Zpos (XI p)
  | Zneg p -> Zneg (Pos.pred_double p)

  (** val pred_double : z -> z **)

  let pred_double = function
  | Z0 -> Zneg XH
  | Zpos p -> Zpos (Pos.pred_double p)
  | Zneg p -> Zneg (XI p)

  (** val pos_sub : positive -> positive -> z **)

  let rec pos_sub x y =
    match x with
    | XI p ->
      (match y with
       | XI q -> double (pos_sub p q)
       | XO q -> succ_double (pos_sub p q)
       | XH -> Zpos (XO p))
    | XO p ->
      (match y with
       | XI q -> pred_double (pos_sub p q)
       | XO q -> double (pos_sub p q)
       | XH -> Zpos (Pos.pred_double p))
    | XH ->
      (match y with
       | XI q -> Zneg (XO q)
       | XO q -> Zneg (Pos.pred_double q)
       | XH -> Z0)

  (** val add : z -> z -> z **)

  let add x y =
    match x with
    | Z0 -> y
    | Zpos x' ->
      (match y with
       | Z0 -> x
       | Zpos y' -> Zpos (Pos.add x' y')
       | Zneg y' -> pos_sub x' y')
    | Zneg x' ->
      (match y with
       | Z0 -> x
       | Zpos y' -> pos_sub y' x'
       | Zneg y' -> Zneg (Pos.add x' y'))

  (** val opp : z -> z **)

  let opp = function
  | Z0 -> Z0
  | Zpos x0 -> Zneg x0
  | Zneg x0 -> Zpos x0

  (** val sub : z -> z -> z **)

  let sub m n =
    add m (opp n)

  (** val mul : z -> z -> z **)

  let mul x y =
    match x with
    | Z0 -> Z0
    | Zpos x' ->
      (match y with
       | Z0 -> Z0
       | Zpos y' -> Zpos (Pos.mul x' y')
       | Zneg y' -> Zneg (Pos.mul x' y'))
    | Zneg x' ->
      (match y with
       | Z0 -> Z0
       | Zpos y' -> Zneg (Pos.mul x' y')
       | Zneg y' -> Zpos (Pos.mul x' y'))

  (** val compare : z -> z -> comparison **)

  let compare x y =
    match x with
    | Z0 -> (match y with
             | Z0 -> Eq
             | Zpos _ -> Lt
             | Zneg _ -> Gt)
    | Zpos x' -> (match y with
                  | Zpos y' -> Pos.compare x' y'
                  | _ -> Gt)
    | Zneg x' ->
      (match y with
       | Zneg y' -> compOpp (Pos.compare x' y')
       | _ -> Lt)

  (** val ltb : z -> z -> bool **)

  let ltb x y =
    match compare x y with
    | Lt -> true
    | _ -> false

  (** val eqb : z -> z -> bool **)

  let eqb x y =
    match x with
    | Z0 -> (match y with
             | Z0 -> true
             | _ -> false)
    | Zpos p -> (match y with
                 | Zpos q -> Pos.eqb p q
                 | _ -> false)
    | Zneg p -> (match y with
                 | Zneg q -> Pos.eqb p q
                 | _ -> false)

  (** val max : z -> z -> z **)

  let max n m =
    match compare n m with
    | Lt -> m
    | _ -> n

  (** val to_nat : z -> nat **)

  let to_nat = function
  | Zpos p -> Pos.to_nat p
  | _ -> O

  (** val of_nat : nat -> z **)

  let of_nat = function
  | O -> Z0
  | S n0 -> Zpos (Pos.of_succ_nat n0)

  (** val to_pos : z -> positive **)

  let to_pos = function
  | Zpos p -> p
  | _ -> XH
 end

(** val nth_error : 'a1 list -> nat -> 'a1 option **)

let rec nth_error l = function
| O -> (match l with
        | [] -> None
        | x :: _ -> Some x)
| S n0 -> (match l with
           | [] -> None
           | _ :: l0 -> nth_error l0 n0)

(** val rev : 'a1 list -> 'a1 list **)

let rec rev = function
| [] -> []
| x :: l' -> app (rev l') (x :: [])

(** val rev_append : 'a1 list -> 'a1 list -> 'a1 list **)

let rec rev_append l l' =
  match l with
  | [] -> l'
  | a :: l0 -> rev_append l0 (a :: l')

(** val map : ('a1 -> 'a2) -> 'a1 list -> 'a2 list **)

let rec map f = function
| [] -> []
| a :: t0 -> (f a) :: (map f t0)

(** val flat_map : ('a1 -> 'a2 list) -> 'a1 list -> 'a2 list **)

let rec flat_map f = function
| [] -> []
| x :: t0 -> app (f x) (flat_map f t0)

(** val fold_left : ('a1 -> 'a2 -> 'a1) -> 'a2 list -> 'a1 -> 'a1 **)

let rec fold_left f l a0 =
  match l with
  | [] -> a0
  | b :: t0 -> fold_left f t0 (f a0 b)

(** val fold_right : ('a2 -> 'a1 -> 'a1) -> 'a1 -> 'a2 list -> 'a1 **)

let rec fold_right f a0 = function
| [] -> a0
| b :: t0 -> f b (fold_right f a0 t0)

(** val existsb : ('a1 -> bool) -> 'a1 list -> bool **)

let rec existsb f = function
| [] -> false
| a :: l0 -> (||) (f a) (existsb f l0)

(** val forallb : ('a1 -> bool) -> 'a1 list -> bool **)

let rec forallb f = function
| [] -> true
| a :: l0 -> (&&) (f a) (forallb f l0)

(** val filter : ('a1 -> bool) -> 'a1 list -> 'a1 list **)

let rec filter f = function
| [] -> []
| x :: l0 -> if f x then x :: (filter f l0) else filter f l0

(** val find : ('a1 -> bool) -> 'a1 list -> 'a1 option **)

let rec find f = function
| [] -> None
| x :: tl -> if f x then Some x else find f tl

(** val combine : 'a1 list -> 'a2 list -> ('a1 * 'a2) list **)

let rec combine l l' =
  match l with
  | [] -> []
  | x :: tl ->
    (match l' with
     | [] -> []
     | y :: tl' -> (x, y) :: (combine tl tl'))

type 'v query = { vertices : 'v list; adjacent : ('v -> 'v -> bool);
                  ends : 'v list; required : ('v * 'v) list;
                  forbidden : ('v * 'v) list }

(** val path_steps : 'a1 list -> ('a1 * 'a1) list **)

let rec path_steps = function
| [] -> []
| u :: rest ->
  (match rest with
   | [] -> []
   | v :: _ -> (u, v) :: (path_steps rest))

(** val cycle_steps : 'a1 list -> ('a1 * 'a1) list **)

let cycle_steps h = match h with
| [] -> []
| u :: _ -> path_steps (app h (u :: []))

module PositiveMap =
 struct
  type key = positive

  type 'a tree =
  | Leaf
  | Node of 'a tree * 'a option * 'a tree

  type 'a t = 'a tree

  (** val empty : 'a1 t **)

  let empty =
    Leaf

  (** val find : key -> 'a1 t -> 'a1 option **)

  let rec find i = function
  | Leaf -> None
  | Node (l, o, r) ->
    (match i with
     | XI ii -> find ii r
     | XO ii -> find ii l
     | XH -> o)

  (** val mem : key -> 'a1 t -> bool **)

  let rec mem i = function
  | Leaf -> false
  | Node (l, o, r) ->
    (match i with
     | XI ii -> mem ii r
     | XO ii -> mem ii l
     | XH -> (match o with
              | Some _ -> true
              | None -> false))

  (** val add : key -> 'a1 -> 'a1 t -> 'a1 t **)

  let rec add i v = function
  | Leaf ->
    (match i with
     | XI ii -> Node (Leaf, None, (add ii v Leaf))
     | XO ii -> Node ((add ii v Leaf), None, Leaf)
     | XH -> Node (Leaf, (Some v), Leaf))
  | Node (l, o, r) ->
    (match i with
     | XI ii -> Node (l, o, (add ii v r))
     | XO ii -> Node ((add ii v l), o, r)
     | XH -> Node (l, (Some v), r))

  (** val remove : key -> 'a1 t -> 'a1 t **)

  let rec remove i m =
    match i with
    | XI ii ->
      (match m with
       | Leaf -> Leaf
       | Node (l, o, r) ->
         (match l with
          | Leaf ->
            (match o with
             | Some _ -> Node (l, o, (remove ii r))
             | None ->
               (match remove ii r with
                | Leaf -> Leaf
                | Node (t0, o0, t1) -> Node (Leaf, None, (Node (t0, o0, t1)))))
          | Node (_, _, _) -> Node (l, o, (remove ii r))))
    | XO ii ->
      (match m with
       | Leaf -> Leaf
       | Node (l, o, r) ->
         (match o with
          | Some _ -> Node ((remove ii l), o, r)
          | None ->
            (match r with
             | Leaf ->
               (match remove ii l with
                | Leaf -> Leaf
                | Node (t0, o0, t1) -> Node ((Node (t0, o0, t1)), None, Leaf))
             | Node (_, _, _) -> Node ((remove ii l), o, r))))
    | XH ->
      (match m with
       | Leaf -> Leaf
       | Node (l, _, r) ->
         (match l with
          | Leaf ->
            (match r with
             | Leaf -> Leaf
             | Node (_, _, _) -> Node (l, None, r))
          | Node (_, _, _) -> Node (l, None, r)))
 end

(** val count_up : nat -> z -> z list **)

let rec count_up n lo =
  match n with
  | O -> []
  | S n' -> lo :: (count_up n' (Z.add lo (Zpos XH)))

(** val range : z -> z -> z list **)

let range lo hi =
  count_up (Z.to_nat (Z.add (Z.sub hi lo) (Zpos XH))) lo

(** val shelf : z -> positive **)

let shelf u =
  Z.to_pos (Z.add u (Zpos XH))

(** val shelve : (z * z) list -> (z * z) list PositiveMap.t **)

let shelve edges0 =
  fold_right (fun e m ->
    let i = shelf (fst e) in
    (match PositiveMap.find i m with
     | Some l -> PositiveMap.add i (e :: l) m
     | None -> PositiveMap.add i (e :: []) m)) PositiveMap.empty edges0

(** val listed : z -> z -> (z * z) list -> bool **)

let rec listed u v = function
| [] -> false
| e :: l ->
  if if Z.eqb u (fst e) then Z.eqb v (snd e) else false
  then true
  else listed u v l

(** val shelved : (z * z) list PositiveMap.t -> z -> z -> bool **)

let shelved m u v =
  match PositiveMap.find (shelf u) m with
  | Some l -> listed u v l
  | None -> false

(** val joins : (z * z) list -> z -> z -> bool **)

let joins edges0 =
  let m = shelve edges0 in
  (fun u v -> if shelved m u v then true else shelved m v u)

(** val edge_graph : z -> (z * z) list -> z query **)

let edge_graph n edges0 =
  { vertices = (range Z0 (Z.sub n (Zpos XH))); adjacent = (joins edges0);
    ends = []; required = []; forbidden = [] }

(** val demand :
    z query -> z list -> (z * z) list -> (z * z) list -> z query **)

let demand q ends0 required0 forbidden0 =
  { vertices = q.vertices; adjacent = q.adjacent; ends = ends0; required =
    required0; forbidden = forbidden0 }

type vertex = positive

type question = { order : nat; edges : (vertex * vertex) list;
                  needed : (vertex * vertex) list }

(** val pair_ltb : (vertex * vertex) -> (vertex * vertex) -> bool **)

let pair_ltb e f =
  (||) (Pos.ltb (fst e) (fst f))
    ((&&) (Pos.eqb (fst e) (fst f)) (Pos.ltb (snd e) (snd f)))

(** val sorted_pairs : (vertex * vertex) list -> bool **)

let rec sorted_pairs = function
| [] -> true
| e :: rest ->
  (match rest with
   | [] -> true
   | f :: _ -> (&&) (pair_ltb e f) (sorted_pairs rest))

(** val pair_fine : positive -> (vertex * vertex) -> bool **)

let pair_fine n e =
  (&&) (Pos.ltb (fst e) (snd e)) (Pos.leb (snd e) n)

(** val subset : (vertex * vertex) list -> (vertex * vertex) list -> bool **)

let rec subset l m =
  match l with
  | [] -> true
  | e :: l' ->
    let rec seek = function
    | [] -> false
    | f :: m' ->
      if (&&) (Pos.eqb (fst e) (fst f)) (Pos.eqb (snd e) (snd f))
      then subset l' m'
      else seek m'
    in seek m

(** val well_formed : question -> bool **)

let well_formed q =
  match q.order with
  | O ->
    (match q.edges with
     | [] -> (match q.needed with
              | [] -> true
              | _ :: _ -> false)
     | _ :: _ -> false)
  | S n0 ->
    (&&)
      ((&&)
        ((&&) (forallb (pair_fine (Pos.of_nat (S n0))) q.edges)
          (sorted_pairs q.edges)) (sorted_pairs q.needed))
      (subset q.needed q.edges)

(** val insert :
    vertex -> vertex -> vertex list PositiveMap.t -> vertex list PositiveMap.t **)

let insert u v m =
  match PositiveMap.find u m with
  | Some l -> PositiveMap.add u (v :: l) m
  | None -> PositiveMap.add u (v :: []) m

(** val adjacency : question -> vertex list PositiveMap.t **)

let adjacency q =
  fold_left (fun m e -> insert (fst e) (snd e) (insert (snd e) (fst e) m))
    q.edges PositiveMap.empty

(** val neighbours : vertex list PositiveMap.t -> vertex -> vertex list **)

let neighbours m v =
  match PositiveMap.find v m with
  | Some l -> l
  | None -> []

(** val pair_eqb : (vertex * vertex) -> (vertex * vertex) -> bool **)

let pair_eqb e f =
  (&&) (Pos.eqb (fst e) (fst f)) (Pos.eqb (snd e) (snd f))

(** val ordered : (vertex * vertex) -> vertex * vertex **)

let ordered e =
  if Pos.ltb (fst e) (snd e) then e else ((snd e), (fst e))

type 'v named =
  'v -> 'v -> bool
  (* singleton inductive, whose constructor was Build_Named *)

(** val same : 'a1 named -> 'a1 -> 'a1 -> bool **)

let same named0 =
  named0

(** val named_number : z named **)

let named_number =
  Z.eqb

(** val named_pair : 'a1 named -> 'a2 named -> ('a1 * 'a2) named **)

let named_pair nameA nameB u v =
  if same nameA (fst u) (fst v) then same nameB (snd u) (snd v) else false

type outcome =
| Unfit
| Missing
| OneVertex
| Asks of question

(** val number : vertex -> 'a1 list -> (vertex * 'a1) list **)

let rec number i = function
| [] -> []
| v :: l' -> (i, v) :: (number (Pos.succ i) l')

(** val numbered : 'a1 query -> (vertex * 'a1) list **)

let numbered q =
  number XH q.vertices

(** val holds : ('a1 -> bool) -> 'a1 list -> bool **)

let rec holds test = function
| [] -> false
| x :: l' -> if test x then true else holds test l'

(** val no_repeats : 'a1 named -> 'a1 list -> bool **)

let rec no_repeats named0 = function
| [] -> true
| v :: l' ->
  if negb (holds (same named0 v) l') then no_repeats named0 l' else false

(** val is_edge : 'a1 named -> 'a1 query -> 'a1 -> 'a1 -> bool **)

let is_edge named0 q u v =
  if q.adjacent u v
  then negb
         (if holds (same (named_pair named0 named0) (u, v)) q.forbidden
          then true
          else holds (same (named_pair named0 named0) (v, u)) q.forbidden)
  else false

(** val meets : 'a1 named -> 'a1 query -> 'a1 -> 'a1 -> bool **)

let meets named0 q u v =
  if is_edge named0 q u v then true else is_edge named0 q v u

(** val row :
    'a1 named -> 'a1 query -> vertex -> 'a1 -> (vertex * 'a1) list ->
    (vertex * vertex) list -> (vertex * vertex) list **)

let rec row named0 q i u later more =
  match later with
  | [] -> more
  | p :: later' ->
    let (j, v) = p in
    if meets named0 q u v
    then (i, j) :: (row named0 q i u later' more)
    else row named0 q i u later' more

(** val rows :
    'a1 named -> 'a1 query -> (vertex -> 'a1 -> (vertex * vertex) list ->
    (vertex * vertex) list) -> (vertex * 'a1) list -> (vertex * vertex) list **)

let rec rows named0 q close = function
| [] -> []
| p :: later ->
  let (i, u) = p in
  row named0 q i u later (close i u (rows named0 q close later))

(** val place : 'a1 named -> 'a1 query -> 'a1 -> vertex option **)

let place named0 q u =
  option_map fst (find (fun p -> same named0 u (snd p)) (numbered q))

(** val collect : ('a1 -> 'a2 option) -> 'a1 list -> 'a2 list option **)

let rec collect f = function
| [] -> Some []
| x :: l' ->
  (match f x with
   | Some y ->
     (match collect f l' with
      | Some ys -> Some (y :: ys)
      | None -> None)
   | None -> None)

(** val place_pair :
    'a1 named -> 'a1 query -> ('a1 * 'a1) -> (vertex * vertex) option **)

let place_pair named0 q e =
  match place named0 q (fst e) with
  | Some i ->
    (match place named0 q (snd e) with
     | Some j -> Some (ordered (i, j))
     | None -> None)
  | None -> None

(** val ask :
    nat -> (vertex * vertex) list -> (vertex * vertex) list -> outcome **)

let ask n all wanted =
  if forallb (fun e -> holds (pair_eqb e) all) wanted
  then Asks { order = n; edges = all; needed =
         (filter (fun e -> holds (pair_eqb e) wanted) all) }
  else Missing

(** val normal_cycle : 'a1 named -> 'a1 query -> outcome **)

let normal_cycle named0 q =
  if no_repeats named0 q.vertices
  then (match collect (place_pair named0 q) q.required with
        | Some wanted ->
          ask (length q.vertices)
            (rows named0 q (fun _ _ more -> more) (numbered q)) wanted
        | None -> Missing)
  else Unfit

(** val may_end : 'a1 named -> 'a1 query -> 'a1 -> bool **)

let may_end named0 q u =
  match q.ends with
  | [] -> true
  | _ :: l ->
    (match l with
     | [] -> true
     | _ :: l0 ->
       (match l0 with
        | [] -> holds (same named0 u) q.ends
        | _ :: _ -> true))

(** val join_apex :
    'a1 named -> 'a1 query -> vertex -> vertex -> 'a1 -> (vertex * vertex)
    list -> (vertex * vertex) list **)

let join_apex named0 q apex i u more =
  if may_end named0 q u then (i, apex) :: more else more

(** val normal_path : 'a1 named -> 'a1 query -> outcome **)

let normal_path named0 q =
  let n = length q.vertices in
  let apex = Pos.of_succ_nat n in
  if no_repeats named0 q.vertices
  then (match collect (place_pair named0 q) q.required with
        | Some wanted ->
          (match collect (place named0 q) q.ends with
           | Some tips ->
             (match ask (S n)
                      (rows named0 q (join_apex named0 q apex) (numbered q))
                      (app (map (fun i -> (i, apex)) tips) wanted) with
              | Asks q0 ->
                (match n with
                 | O -> Asks q0
                 | S n0 -> (match n0 with
                            | O -> OneVertex
                            | S _ -> Asks q0))
              | x -> x)
           | None -> Missing)
        | None -> Missing)
  else Unfit

(** val by_number : 'a1 query -> 'a1 PositiveMap.t **)

let by_number q =
  fold_right (fun p m -> PositiveMap.add (fst p) (snd p) m) PositiveMap.empty
    (numbered q)

(** val visit :
    'a1 PositiveMap.t -> vertex list -> (vertex * 'a1) list option **)

let rec visit left0 = function
| [] -> Some []
| i :: order' ->
  (match PositiveMap.find i left0 with
   | Some v ->
     option_map (fun x -> (i, v) :: x)
       (visit (PositiveMap.remove i left0) order')
   | None -> None)

(** val steps_fine : 'a1 named -> 'a1 query -> ('a1 * 'a1) list -> bool **)

let steps_fine named0 q steps0 =
  if forallb (fun e -> is_edge named0 q (fst e) (snd e)) steps0
  then forallb (fun e ->
         if holds (same (named_pair named0 named0) e) steps0
         then true
         else holds (same (named_pair named0 named0) ((snd e), (fst e)))
                steps0) q.required
  else false

(** val starts_with : 'a1 named -> 'a1 list -> 'a1 -> bool **)

let starts_with named0 h s =
  match h with
  | [] -> false
  | u :: _ -> same named0 u s

(** val stops_with : 'a1 named -> 'a1 list -> 'a1 -> bool **)

let rec stops_with named0 h t0 =
  match h with
  | [] -> false
  | u :: h' ->
    (match h' with
     | [] -> same named0 u t0
     | _ :: _ -> stops_with named0 h' t0)

(** val ends_fine : 'a1 named -> 'a1 query -> 'a1 list -> bool **)

let ends_fine named0 q h =
  match q.ends with
  | [] -> true
  | s :: l ->
    (match l with
     | [] -> if starts_with named0 h s then true else stops_with named0 h s
     | t0 :: l0 ->
       (match l0 with
        | [] ->
          if if starts_with named0 h s then stops_with named0 h t0 else false
          then true
          else if starts_with named0 h t0
               then stops_with named0 h s
               else false
        | _ :: _ -> false))

(** val visited : 'a1 query -> vertex list -> 'a1 list option **)

let visited q order0 =
  if eqb (length order0) (length q.vertices)
  then option_map (map snd) (visit (by_number q) order0)
  else None

(** val check_path : 'a1 named -> 'a1 query -> vertex list -> bool **)

let check_path named0 q order0 =
  match visited q order0 with
  | Some h ->
    (match h with
     | [] -> false
     | _ :: _ ->
       if steps_fine named0 q (path_steps h)
       then ends_fine named0 q h
       else false)
  | None -> false

(** val check_cycle : 'a1 named -> 'a1 query -> vertex list -> bool **)

let check_cycle named0 q order0 =
  match visited q order0 with
  | Some h ->
    (match h with
     | [] -> false
     | _ :: l ->
       (match l with
        | [] -> false
        | _ :: l0 ->
          (match l0 with
           | [] -> false
           | _ :: _ -> steps_fine named0 q (cycle_steps h))))
  | None -> false

(** val count : ('a1 -> bool) -> 'a1 list -> nat **)

let count p l =
  length (filter p l)

(** val leaves : (vertex -> bool) -> (vertex * vertex) -> bool **)

let leaves s e =
  xorb (s (fst e)) (s (snd e))

(** val last_vertex : question -> positive **)

let last_vertex q =
  Pos.of_nat q.order

(** val rising : vertex list -> bool **)

let rec rising = function
| [] -> true
| u :: rest ->
  (match rest with
   | [] -> true
   | v :: _ -> (&&) (Pos.ltb u v) (rising rest))

(** val vertex_set : positive -> vertex list -> bool **)

let vertex_set n l =
  (&&) (rising l) (forallb (fun v -> Pos.leb v n) l)

(** val members : vertex list -> unit PositiveMap.t **)

let members l =
  fold_left (fun m v -> PositiveMap.add v () m) l PositiveMap.empty

(** val all_new : unit PositiveMap.t -> vertex list -> bool **)

let rec all_new seen = function
| [] -> true
| v :: l0 ->
  if PositiveMap.mem v seen
  then false
  else all_new (PositiveMap.add v () seen) l0

(** val distinct : vertex list -> bool **)

let distinct l =
  all_new PositiveMap.empty l

(** val count_up0 : nat -> vertex -> vertex list **)

let rec count_up0 k v =
  match k with
  | O -> []
  | S k0 -> v :: (count_up0 k0 (Pos.succ v))

(** val flood :
    vertex list PositiveMap.t -> unit PositiveMap.t -> vertex -> nat ->
    vertex list -> vertex PositiveMap.t -> vertex PositiveMap.t **)

let rec flood near set name fuel stack label =
  match fuel with
  | O -> label
  | S fuel0 ->
    (match stack with
     | [] -> label
     | v :: stack0 ->
       if (||) (PositiveMap.mem v set) (PositiveMap.mem v label)
       then flood near set name fuel0 stack0 label
       else flood near set name fuel0 (rev_append (neighbours near v) stack0)
              (PositiveMap.add v name label))

(** val labels : question -> unit PositiveMap.t -> vertex PositiveMap.t **)

let labels q set =
  let near = adjacency q in
  let fuel = S (add (length q.edges) (length q.edges)) in
  fold_left (fun label v -> flood near set v fuel (v :: []) label)
    (count_up0 q.order XH) PositiveMap.empty

(** val labelled : vertex PositiveMap.t -> vertex -> vertex -> bool **)

let labelled label v name =
  match PositiveMap.find v label with
  | Some found -> Pos.eqb found name
  | None -> false

(** val names_piece :
    unit PositiveMap.t -> vertex PositiveMap.t -> vertex -> bool **)

let names_piece set label v =
  (&&) (negb (PositiveMap.mem v set)) (labelled label v v)

(** val keeps_label :
    unit PositiveMap.t -> vertex PositiveMap.t -> (vertex * vertex) -> bool **)

let keeps_label set label e =
  (||) ((||) (PositiveMap.mem (fst e) set) (PositiveMap.mem (snd e) set))
    (match PositiveMap.find (fst e) label with
     | Some a ->
       (match PositiveMap.find (snd e) label with
        | Some b -> Pos.eqb a b
        | None -> false)
     | None -> false)

type obstruction =
| Small
| Leaf0 of vertex
| Crowded of vertex * vertex * vertex * vertex
| Ring of vertex list
| Separator of vertex list
| Independent of vertex list

(** val must : question -> vertex list PositiveMap.t **)

let must q =
  adjacency { order = q.order; edges = q.needed; needed = [] }

(** val two : vertex list -> bool **)

let two = function
| [] -> false
| _ :: l0 ->
  (match l0 with
   | [] -> false
   | _ :: l1 -> (match l1 with
                 | [] -> true
                 | _ :: _ -> false))

(** val among : vertex -> vertex list -> bool **)

let among v l =
  existsb (Pos.eqb v) l

(** val forced :
    vertex list PositiveMap.t -> vertex list PositiveMap.t -> vertex ->
    vertex -> bool **)

let forced near must0 u v =
  (&&) (among v (neighbours near u))
    ((||) ((||) (among v (neighbours must0 u)) (two (neighbours near u)))
      (two (neighbours near v)))

(** val check_leaf : question -> vertex -> bool **)

let check_leaf q v =
  (&&) (Pos.leb v (last_vertex q))
    (Nat.leb (length (neighbours (adjacency q) v)) (S O))

(** val check_crowded :
    question -> vertex -> vertex -> vertex -> vertex -> bool **)

let check_crowded q v a b c =
  let near = adjacency q in
  let must0 = must q in
  (&&) ((&&) ((&&) (Pos.leb v (last_vertex q)) (Pos.ltb a b)) (Pos.ltb b c))
    (forallb (forced near must0 v) (a :: (b :: (c :: []))))

(** val check_ring : question -> vertex list -> bool **)

let check_ring q l =
  let near = adjacency q in
  let must0 = must q in
  (&&)
    ((&&) ((&&) (distinct l) (Nat.leb (S (S (S O))) (length l)))
      (Nat.ltb (length l) q.order))
    (forallb (fun e -> forced near must0 (fst e) (snd e)) (cycle_steps l))

(** val both_in : unit PositiveMap.t -> (vertex * vertex) -> bool **)

let both_in set e =
  (&&) (PositiveMap.mem (fst e) set) (PositiveMap.mem (snd e) set)

(** val none_in : unit PositiveMap.t -> (vertex * vertex) -> bool **)

let none_in set e =
  (&&) (negb (PositiveMap.mem (fst e) set))
    (negb (PositiveMap.mem (snd e) set))

(** val check_separator : question -> vertex list -> bool **)

let check_separator q s =
  let set = members s in
  let label = labels q set in
  let pieces = length (filter (names_piece set label) (count_up0 q.order XH))
  in
  let inside = count (both_in set) q.needed in
  (&&)
    ((&&)
      ((&&)
        ((&&) (vertex_set (last_vertex q) s) (Nat.ltb (length s) q.order))
        (forallb (keeps_label set label) q.edges))
      (Nat.ltb (length s) (add pieces inside)))
    (match s with
     | [] -> Nat.leb (S (S O)) pieces
     | _ :: _ -> true)

(** val check_independent : question -> vertex list -> bool **)

let check_independent q s =
  let set = members s in
  let elsewhere = count (none_in set) q.needed in
  (&&)
    ((&&) (vertex_set (last_vertex q) s)
      (forallb (fun e -> negb (both_in set e)) q.edges))
    (Nat.ltb q.order (add (mul (S (S O)) (length s)) elsewhere))

(** val check_obstruction : question -> obstruction -> bool **)

let check_obstruction q = function
| Small -> Nat.ltb q.order (S (S (S O)))
| Leaf0 v -> (&&) (Nat.leb (S (S (S O))) q.order) (check_leaf q v)
| Crowded (v, a, b, c) ->
  (&&) (Nat.leb (S (S (S O))) q.order) (check_crowded q v a b c)
| Ring l -> (&&) (Nat.leb (S (S (S O))) q.order) (check_ring q l)
| Separator s -> (&&) (Nat.leb (S (S (S O))) q.order) (check_separator q s)
| Independent s ->
  (&&) (Nat.leb (S (S (S O))) q.order) (check_independent q s)

type counting = { weights : (vertex * z) list; cuts : (vertex list * z) list;
                  parities : ((vertex list * (vertex * vertex) list) * z) list }

type scores = z PositiveMap.t PositiveMap.t

(** val score : scores -> (vertex * vertex) -> z **)

let score m e =
  match PositiveMap.find (fst e) m with
  | Some row0 ->
    (match PositiveMap.find (snd e) row0 with
     | Some z0 -> z0
     | None -> Z0)
  | None -> Z0

(** val add_score : z -> scores -> (vertex * vertex) -> scores **)

let add_score z0 m e =
  let row0 =
    match PositiveMap.find (fst e) m with
    | Some row0 -> row0
    | None -> PositiveMap.empty
  in
  let old =
    match PositiveMap.find (snd e) row0 with
    | Some old -> old
    | None -> Z0
  in
  PositiveMap.add (fst e) (PositiveMap.add (snd e) (Z.add old z0) row0) m

(** val star :
    vertex list PositiveMap.t -> vertex -> (vertex * vertex) list **)

let star near v =
  map (fun u -> ordered (v, u)) (neighbours near v)

(** val leaving :
    vertex list PositiveMap.t -> vertex list -> unit PositiveMap.t ->
    (vertex * vertex) list **)

let leaving near s set =
  flat_map (fun u ->
    map (fun w -> ordered (u, w))
      (filter (fun w -> negb (PositiveMap.mem w set)) (neighbours near u))) s

(** val proper : question -> positive -> vertex list -> bool **)

let proper q last s =
  (&&) ((&&) (vertex_set last s) (Nat.leb (S O) (length s)))
    (Nat.ltb (length s) q.order)

(** val crosses :
    vertex list PositiveMap.t -> unit PositiveMap.t -> (vertex * vertex) ->
    bool **)

let crosses near set e =
  (&&)
    ((&&) (Pos.ltb (fst e) (snd e))
      (existsb (Pos.eqb (snd e)) (neighbours near (fst e))))
    (leaves (fun v -> PositiveMap.mem v set) e)

type state = scores * z

(** val add_weight :
    vertex list PositiveMap.t -> state -> (vertex * z) -> state **)

let add_weight near t0 w =
  ((fold_left (add_score (snd w)) (star near (fst w)) (fst t0)),
    (Z.add (snd t0) (Z.mul (Zpos (XO XH)) (snd w))))

(** val add_cut :
    vertex list PositiveMap.t -> state -> (vertex list * z) -> state **)

let add_cut near t0 = function
| (s, z0) ->
  ((fold_left (add_score z0) (leaving near s (members s)) (fst t0)),
    (Z.add (snd t0) (Z.mul (Zpos (XO XH)) z0)))

(** val add_parity :
    vertex list PositiveMap.t -> state -> ((vertex list * (vertex * vertex)
    list) * z) -> state **)

let add_parity near t0 = function
| (p0, z0) ->
  let (s, f) = p0 in
  ((fold_left (add_score (Z.mul (Zneg (XO XH)) z0)) f
     (fold_left (add_score z0) (leaving near s (members s)) (fst t0))),
  (Z.add (snd t0) (Z.mul z0 (Z.sub (Zpos XH) (Z.of_nat (length f))))))

(** val weights_fine : positive -> (vertex * z) list -> bool **)

let weights_fine last l =
  (&&) (vertex_set last (map fst l))
    (forallb (fun w -> negb (Z.eqb (snd w) Z0)) l)

(** val cut_fine : question -> positive -> (vertex list * z) -> bool **)

let cut_fine q last c =
  (&&) (proper q last (fst c)) (Z.ltb Z0 (snd c))

(** val parity_fine :
    question -> vertex list PositiveMap.t -> positive -> ((vertex
    list * (vertex * vertex) list) * z) -> bool **)

let parity_fine q near last = function
| (p0, z0) ->
  let (s, f) = p0 in
  (&&)
    ((&&) ((&&) ((&&) (proper q last s) (Z.ltb Z0 z0)) (Nat.odd (length f)))
      (sorted_pairs f)) (forallb (crosses near (members s)) f)

(** val offer :
    scores -> (vertex * vertex) list -> (vertex * vertex) list -> z -> z **)

let rec offer m edges0 needed0 t0 =
  match edges0 with
  | [] -> t0
  | e :: edges1 ->
    (match needed0 with
     | [] -> offer m edges1 [] (Z.add t0 (Z.max Z0 (score m e)))
     | f :: rest ->
       if pair_eqb e f
       then offer m edges1 rest (Z.add t0 (score m e))
       else offer m edges1 needed0 (Z.add t0 (Z.max Z0 (score m e))))

(** val check_counting : question -> counting -> bool **)

let check_counting q c =
  let near = adjacency q in
  let last = last_vertex q in
  (&&)
    ((&&)
      ((&&)
        ((&&) (Nat.leb (S (S (S O))) q.order) (weights_fine last c.weights))
        (forallb (cut_fine q last) c.cuts))
      (forallb (parity_fine q near last) c.parities))
    (let start0 = (PositiveMap.empty, Z0) in
     let one = fold_left (add_weight near) c.weights start0 in
     let two0 = fold_left (add_cut near) c.cuts one in
     let (m, need) = fold_left (add_parity near) c.parities two0 in
     Z.ltb (offer m q.edges q.needed Z0) need)

type state0 = { left : vertex list PositiveMap.t;
                chosen : vertex list PositiveMap.t;
                far : (vertex * positive) PositiveMap.t; waiting : vertex list }

(** val without : vertex -> vertex list -> vertex list **)

let without v l =
  filter (fun w -> negb (Pos.eqb v w)) l

(** val full : 'a1 list -> bool **)

let full = function
| [] -> false
| _ :: l0 -> (match l0 with
              | [] -> false
              | _ :: _ -> true)

(** val far_end :
    (vertex * positive) PositiveMap.t -> vertex -> vertex * positive **)

let far_end m v =
  match PositiveMap.find v m with
  | Some p -> p
  | None -> (v, XH)

(** val is_left : state0 -> vertex -> vertex -> bool **)

let is_left s u v =
  among v (neighbours s.left u)

(** val is_chosen : state0 -> vertex -> vertex -> bool **)

let is_chosen s u v =
  among v (neighbours s.chosen u)

(** val is_open : state0 -> vertex -> vertex -> bool **)

let is_open s u v =
  (&&) (is_left s u v) (negb (is_chosen s u v))

(** val remove0 : vertex -> vertex -> state0 -> state0 option **)

let remove0 u v s =
  if negb (is_left s u v)
  then Some s
  else if is_chosen s u v
       then None
       else Some { left =
              (PositiveMap.add u (without v (neighbours s.left u))
                (PositiveMap.add v (without u (neighbours s.left v)) s.left));
              chosen = s.chosen; far = s.far; waiting =
              (u :: (v :: s.waiting)) }

(** val choose :
    vertex -> vertex -> (vertex * positive) PositiveMap.t -> state0 -> state0 **)

let choose u v m s =
  { left = s.left; chosen =
    (PositiveMap.add u (v :: (neighbours s.chosen u))
      (PositiveMap.add v (u :: (neighbours s.chosen v)) s.chosen)); far = m;
    waiting = (u :: (v :: s.waiting)) }

(** val use : positive -> vertex -> vertex -> state0 -> state0 option **)

let use n u v s =
  if is_chosen s u v
  then Some s
  else if (||) ((||) (negb (is_left s u v)) (full (neighbours s.chosen u)))
            (full (neighbours s.chosen v))
       then None
       else let (first0, before) = far_end s.far u in
            let (last, after) = far_end s.far v in
            if Pos.eqb first0 v
            then if Pos.ltb before n then None else Some (choose u v s.far s)
            else let size = Pos.add before after in
                 let joined =
                   choose u v
                     (PositiveMap.add first0 (last, size)
                       (PositiveMap.add last (first0, size) s.far)) s
                 in
                 if (&&) (Pos.ltb size n) (is_open joined first0 last)
                 then remove0 first0 last joined
                 else Some joined

(** val each :
    ('a1 -> state0 -> state0 option) -> 'a1 list -> state0 -> state0 option **)

let rec each move l s =
  match l with
  | [] -> Some s
  | x :: l' -> (match move x s with
                | Some s' -> each move l' s'
                | None -> None)

(** val move_at : positive -> vertex -> state0 -> state0 option **)

let move_at n v s =
  let here = neighbours s.left v in
  (match here with
   | [] -> None
   | _ :: l ->
     (match l with
      | [] -> None
      | _ :: l0 ->
        (match l0 with
         | [] -> each (use n v) here s
         | _ :: _ ->
           let two0 = neighbours s.chosen v in
           if full two0
           then each (remove0 v) (filter (fun w -> negb (among w two0)) here)
                  s
           else Some s)))

(** val settle : positive -> nat -> state0 -> state0 option **)

let rec settle n fuel s =
  match fuel with
  | O -> Some s
  | S fuel' ->
    (match s.waiting with
     | [] -> Some s
     | v :: others ->
       let s' = { left = s.left; chosen = s.chosen; far = s.far; waiting =
         others }
       in
       (match move_at n v s' with
        | Some s'' -> settle n fuel' s''
        | None -> None))

type assumptions = (vertex * vertex) list * (vertex * vertex) list

(** val assume : positive -> nat -> assumptions -> state0 -> state0 option **)

let assume n fuel a s =
  match each (fun e -> use n (fst e) (snd e)) (fst a) s with
  | Some s' ->
    (match each (fun e -> remove0 (fst e) (snd e)) (snd a) s' with
     | Some s'' -> settle n fuel s''
     | None -> None)
  | None -> None

(** val enough : question -> nat **)

let enough q =
  add q.order (mul (S (S O)) (length q.edges))

(** val start : question -> state0 option **)

let start q =
  assume (last_vertex q) (enough q) (q.needed, []) { left = (adjacency q);
    chosen = PositiveMap.empty; far = PositiveMap.empty; waiting =
    (count_up0 q.order XH) }

type node =
| Forced
| ByObstruction of obstruction
| ByCounting of counting
| Edge of vertex * vertex
| Vertex of vertex
| Like of nat * nat

type cases = { nodes : node list; symmetries : vertex list list }

type symmetry = { images : vertex PositiveMap.t;
                  origins : vertex PositiveMap.t }

(** val at_vertex : vertex PositiveMap.t -> vertex -> vertex **)

let at_vertex m v =
  match PositiveMap.find v m with
  | Some w -> w
  | None -> v

(** val symmetry_of : nat -> vertex list -> symmetry **)

let symmetry_of n p =
  fold_right (fun e s -> { images =
    (PositiveMap.add (fst e) (snd e) s.images); origins =
    (PositiveMap.add (snd e) (fst e) s.origins) }) { images =
    PositiveMap.empty; origins = PositiveMap.empty }
    (combine (count_up0 n XH) p)

(** val image_of :
    symmetry -> (vertex -> vertex -> bool) -> (vertex * vertex) -> bool **)

let image_of s test e =
  let x = at_vertex s.origins (fst e) in
  let y = at_vertex s.origins (snd e) in
  (&&)
    ((&&) (Pos.eqb (at_vertex s.images x) (fst e))
      (Pos.eqb (at_vertex s.images y) (snd e))) (test x y)

(** val is_near : vertex list PositiveMap.t -> vertex -> vertex -> bool **)

let is_near near u v =
  among v (neighbours near u)

(** val is_needed : question -> vertex -> vertex -> bool **)

let is_needed q u v =
  existsb (fun e -> (||) (pair_eqb (u, v) e) (pair_eqb (v, u) e)) q.needed

(** val is_symmetry :
    question -> vertex list PositiveMap.t -> vertex list -> bool **)

let is_symmetry q near p =
  let s = symmetry_of q.order p in
  (&&)
    ((&&)
      ((&&) (Nat.eqb (length p) q.order)
        (forallb (fun v ->
          let w = at_vertex s.images v in
          (&&) (Pos.leb w (last_vertex q)) (Pos.eqb (at_vertex s.origins w) v))
          (count_up0 q.order XH)))
      (forallb (fun e ->
        is_near near (at_vertex s.images (fst e)) (at_vertex s.images (snd e)))
        q.edges)) (forallb (image_of s (is_needed q)) q.needed)

(** val rest_of : question -> state0 -> question **)

let rest_of q s =
  let kept = filter (fun e -> is_left s (fst e) (snd e)) q.edges in
  { order = q.order; edges = kept; needed =
  (filter (fun e -> is_chosen s (fst e) (snd e)) kept) }

(** val pairs : vertex list -> (vertex * vertex) list **)

let rec pairs = function
| [] -> []
| a :: l' -> app (map (fun x -> (a, x)) l') (pairs l')

(** val pairs_at : state0 -> vertex -> assumptions list **)

let pairs_at s v =
  let here = neighbours s.chosen v in
  let allowed = fun ab ->
    match here with
    | [] -> true
    | _ :: _ -> (||) (among (fst ab) here) (among (snd ab) here)
  in
  map (fun ab -> (((v, (fst ab)) :: ((v, (snd ab)) :: [])), []))
    (filter allowed (pairs (rev (neighbours s.left v))))

(** val is_like :
    vertex list PositiveMap.t -> state0 -> symmetry -> assumptions -> bool **)

let is_like near s p closed0 =
  (&&) (forallb (image_of p (is_chosen s)) (fst closed0))
    (forallb
      (image_of p (fun u v -> (&&) (is_near near u v) (negb (is_left s u v))))
      (snd closed0))

type place0 = { ahead : node list; number0 : positive;
                closed : assumptions PositiveMap.t }

(** val children :
    question -> vertex list PositiveMap.t -> symmetry list -> state0 option
    -> node -> assumptions PositiveMap.t -> assumptions list option **)

let children q near known s x done0 =
  let need = fun b l -> if b then Some l else None in
  (match s with
   | Some s0 ->
     (match x with
      | Forced -> None
      | ByObstruction o -> need (check_obstruction (rest_of q s0) o) []
      | ByCounting c -> need (check_counting (rest_of q s0) c) []
      | Edge (u, v) ->
        need ((&&) (Pos.ltb u v) (is_open s0 u v)) ((((u, v) :: []),
          []) :: (([], ((u, v) :: [])) :: []))
      | Vertex v ->
        need
          ((&&) (Pos.leb v (last_vertex q))
            (negb (full (neighbours s0.chosen v)))) (pairs_at s0 v)
      | Like (j, k) ->
        (match PositiveMap.find (Pos.of_succ_nat j) done0 with
         | Some a ->
           (match nth_error known k with
            | Some p -> need (is_like near s0 p a) []
            | None -> None)
         | None -> None))
   | None -> (match x with
              | Forced -> Some []
              | _ -> None))

(** val child_state :
    question -> state0 option -> assumptions -> state0 option **)

let child_state q s c =
  match s with
  | Some s0 -> assume (last_vertex q) (enough q) c s0
  | None -> None

(** val both : assumptions -> assumptions -> assumptions **)

let both a c =
  ((app (fst c) (fst a)), (app (snd c) (snd a)))

(** val forest :
    (assumptions -> place0 -> place0 option) -> assumptions list -> place0 ->
    place0 option **)

let rec forest read l p =
  match l with
  | [] -> Some p
  | c :: l' ->
    (match read c p with
     | Some p' -> forest read l' p'
     | None -> None)

(** val tree0 :
    question -> vertex list PositiveMap.t -> symmetry list -> nat -> state0
    option -> assumptions -> place0 -> place0 option **)

let rec tree0 q near known fuel s a p =
  match fuel with
  | O -> None
  | S fuel' ->
    (match p.ahead with
     | [] -> None
     | x :: later ->
       (match children q near known s x p.closed with
        | Some l ->
          (match forest (fun c ->
                   tree0 q near known fuel' (child_state q s c) (both a c)) l
                   { ahead = later; number0 = (Pos.succ p.number0); closed =
                   p.closed } with
           | Some p' ->
             Some { ahead = p'.ahead; number0 = p'.number0; closed =
               (PositiveMap.add p.number0 a p'.closed) }
           | None -> None)
        | None -> None))

(** val check_cases : question -> cases -> bool **)

let check_cases q c =
  let near = adjacency q in
  let known = map (symmetry_of q.order) c.symmetries in
  let root = { ahead = c.nodes; number0 = XH; closed = PositiveMap.empty } in
  (&&)
    ((&&) (Nat.leb (S (S (S O))) q.order)
      (forallb (is_symmetry q near) c.symmetries))
    (match tree0 q near known (length c.nodes) (start q) ([], []) root with
     | Some p -> (match p.ahead with
                  | [] -> true
                  | _ :: _ -> false)
     | None -> false)

type state1 = (vertex * vertex) list

(** val place1 : (vertex * vertex) -> state1 -> state1 **)

let rec place1 p s = match s with
| [] -> p :: []
| q :: s' -> if Pos.ltb (fst p) (fst q) then p :: s else q :: (place1 p s')

(** val take : vertex -> state1 -> (vertex * state1) option **)

let rec take u = function
| [] -> None
| p :: s' ->
  let (a, b) = p in
  if Pos.eqb a u
  then Some (b, s')
  else if Pos.eqb b u
       then Some (a, s')
       else (match take u s' with
             | Some p0 -> let (c, rest) = p0 in Some (c, ((a, b) :: rest))
             | None -> None)

(** val choices :
    vertex -> bool -> vertex option -> state1 -> (vertex * bool) list ->
    state1 list **)

let rec choices v all_reached hand s = function
| [] -> (match hand with
         | Some _ -> []
         | None -> s :: [])
| p :: us' ->
  let (u, must0) = p in
  let without0 = if must0 then [] else choices v all_reached hand s us' in
  (match hand with
   | Some a ->
     if Pos.eqb a u
     then (match s with
           | [] ->
             if all_reached
             then app (choices v all_reached None [] us') without0
             else without0
           | _ :: _ -> without0)
     else (match take u s with
           | Some p0 ->
             let (b, rest) = p0 in
             app
               (if Pos.eqb a v
                then choices v all_reached (Some b) rest us'
                else choices v all_reached None
                       (place1 (ordered (a, b)) rest) us') without0
           | None -> without0)
   | None -> without0)

(** val advance :
    vertex -> bool -> vertex list -> (vertex * bool) list -> state1 -> state1
    list **)

let advance v all_reached fresh us s =
  let s' = fold_right (fun u -> place1 (u, u)) s fresh in
  (match take v s' with
   | Some p -> let (a, rest) = p in choices v all_reached (Some a) rest us
   | None -> choices v all_reached None s' us)

type collection = state1 list PositiveMap.t * state1 list

(** val glue : positive -> positive -> positive **)

let rec glue a k =
  match a with
  | XI a' -> XI (glue a' k)
  | XO a' -> XO (glue a' k)
  | XH -> k

(** val key0 : state1 -> positive **)

let key0 s =
  fold_right (fun p k -> glue (fst p) (glue (snd p) k)) XH s

(** val same0 : state1 -> state1 -> bool **)

let rec same0 s t0 =
  match s with
  | [] -> (match t0 with
           | [] -> true
           | _ :: _ -> false)
  | p :: s' ->
    (match t0 with
     | [] -> false
     | q :: t' -> if pair_eqb p q then same0 s' t' else false)

(** val collect0 : collection -> state1 -> collection **)

let collect0 c s =
  let (found, all) = c in
  let k = key0 s in
  (match PositiveMap.find k found with
   | Some l ->
     if existsb (same0 s) l
     then c
     else ((PositiveMap.add k (s :: l) found), (s :: all))
   | None -> ((PositiveMap.add k (s :: []) found), (s :: all)))

type progress = { marks : bool PositiveMap.t; unreached : nat;
                  states : state1 list }

(** val swept : bool PositiveMap.t -> vertex -> bool **)

let swept m v =
  match PositiveMap.find v m with
  | Some b -> b
  | None -> false

(** val reached : bool PositiveMap.t -> vertex -> bool **)

let reached m v =
  match PositiveMap.find v m with
  | Some _ -> true
  | None -> false

(** val marks_after :
    bool PositiveMap.t -> vertex -> vertex list -> bool PositiveMap.t **)

let marks_after m v ahead0 =
  PositiveMap.add v true
    (fold_right (fun u m0 -> PositiveMap.add u false m0) m ahead0)

(** val is_needed0 : question -> vertex -> vertex -> bool **)

let is_needed0 q v u =
  existsb (pair_eqb (ordered (v, u))) q.needed

(** val sweep_vertex :
    question -> vertex list PositiveMap.t -> progress -> vertex -> progress **)

let sweep_vertex q near now v =
  let m = now.marks in
  let ahead0 = filter (fun u -> negb (swept m u)) (neighbours near v) in
  let fresh = filter (fun u -> negb (reached m u)) (v :: ahead0) in
  let others = sub now.unreached (length fresh) in
  let us = map (fun u -> (u, (is_needed0 q v u))) ahead0 in
  let enter = fun c s ->
    fold_left collect0 (advance v (Nat.eqb others O) fresh us s) c
  in
  { marks = (marks_after m v ahead0); unreached = others; states =
  (snd (fold_left enter now.states (PositiveMap.empty, []))) }

(** val sweep :
    question -> vertex list PositiveMap.t -> positive -> vertex list ->
    progress -> bool **)

let rec sweep q near last l now =
  match l with
  | [] -> (match now.states with
           | [] -> true
           | _ :: _ -> false)
  | v :: rest ->
    if swept now.marks v
    then false
    else if Pos.leb v last
         then sweep q near last rest (sweep_vertex q near now v)
         else false

(** val beginning : question -> progress **)

let beginning q =
  { marks = PositiveMap.empty; unreached = q.order; states = ([] :: []) }

(** val check_sweep : question -> vertex list -> bool **)

let check_sweep q l =
  if (&&) (Nat.leb (S (S (S O))) q.order) (Nat.eqb (length l) q.order)
  then sweep q (adjacency q) (Pos.of_nat q.order) l (beginning q)
  else false

type variable = positive

type literal = positive

type clause = literal list

type step = clause * positive list

(** val number1 : positive -> 'a1 list -> (positive * 'a1) list **)

let rec number1 i = function
| [] -> []
| a :: rest -> (i, a) :: (number1 (Pos.succ i) rest)

(** val by_place : positive -> 'a1 list -> 'a1 PositiveMap.t **)

let by_place i l =
  fold_right (fun e -> PositiveMap.add (fst e) (snd e)) PositiveMap.empty
    (number1 i l)

type database = clause PositiveMap.t

(** val negate : literal -> literal **)

let negate = function
| XI x -> XO x
| XO x -> XI x
| XH -> XH

(** val fail : unit PositiveMap.t -> clause -> unit PositiveMap.t option **)

let rec fail f = function
| [] -> Some f
| l :: rest ->
  if (||) (PositiveMap.mem l f) (PositiveMap.mem (negate l) f)
  then None
  else fail (PositiveMap.add l () f) rest

(** val unit_of : unit PositiveMap.t -> clause -> literal option **)

let rec unit_of f = function
| [] -> None
| l :: rest ->
  if PositiveMap.mem l f
  then unit_of f rest
  else if forallb (fun k -> PositiveMap.mem k f) rest then Some l else None

(** val propagate :
    database -> unit PositiveMap.t -> positive list -> bool **)

let rec propagate known f = function
| [] -> false
| h :: rest ->
  (match PositiveMap.find h known with
   | Some c ->
     (match rest with
      | [] -> forallb (fun l -> PositiveMap.mem l f) c
      | _ :: _ ->
        (match unit_of f c with
         | Some l ->
           if PositiveMap.mem (negate l) f
           then false
           else propagate known (PositiveMap.add (negate l) () f) rest
         | None -> false))
   | None -> false)

(** val check_steps : database -> positive -> step list -> bool **)

let rec check_steps known id = function
| [] -> false
| s :: rest ->
  let (c, hints) = s in
  (match fail PositiveMap.empty c with
   | Some f ->
     if propagate known f hints
     then (match c with
           | [] -> (match rest with
                    | [] -> true
                    | _ :: _ -> false)
           | _ :: _ ->
             check_steps (PositiveMap.add id c known) (Pos.succ id) rest)
     else false
   | None -> false)

(** val check_proof : clause list -> step list -> bool **)

let check_proof given todo =
  check_steps (by_place XH given) (Pos.of_succ_nat (length given)) todo

(** val numbered_edges : question -> (variable * (vertex * vertex)) list **)

let numbered_edges q =
  number1 XH q.edges

(** val first_free : question -> variable **)

let first_free q =
  Pos.of_succ_nat (length q.edges)

type neighbourhoods = (vertex * variable) list PositiveMap.t

(** val around : neighbourhoods -> vertex -> (vertex * variable) list **)

let around near v =
  match PositiveMap.find v near with
  | Some l -> l
  | None -> []

(** val put :
    vertex -> vertex -> variable -> neighbourhoods -> neighbourhoods **)

let put v w i near =
  PositiveMap.add v ((w, i) :: (around near v)) near

(** val surroundings :
    (variable * (vertex * vertex)) list -> neighbourhoods **)

let surroundings l =
  fold_right (fun pat near ->
    let (i, y) = pat in let (u, v) = y in put u v i (put v u i near))
    PositiveMap.empty l

(** val near_edges : question -> neighbourhoods **)

let near_edges q =
  surroundings (numbered_edges q)

(** val variable_of :
    neighbourhoods -> vertex -> vertex -> variable option **)

let variable_of near u v =
  option_map snd (find (fun entry -> Pos.eqb (fst entry) v) (around near u))

type formula = clause list * variable

(** val all_but_one : clause -> clause list **)

let rec all_but_one = function
| [] -> []
| x :: rest -> rest :: (map (fun x0 -> x :: x0) (all_but_one rest))

(** val pairs0 : clause -> clause list **)

let rec pairs0 = function
| [] -> []
| x :: rest -> app (map (fun y -> x :: (y :: [])) rest) (pairs0 rest)

(** val triples : clause -> clause list **)

let rec triples = function
| [] -> []
| x :: rest -> app (map (fun x0 -> x :: x0) (pairs0 rest)) (triples rest)

(** val two_of_few : variable list -> clause list **)

let two_of_few e =
  app (all_but_one (map (fun x -> XO x) e)) (triples (map (fun x -> XI x) e))

(** val second :
    variable -> variable option -> variable -> variable -> clause list **)

let second s t0 x t' =
  match t0 with
  | Some t1 ->
    ((XI t') :: ((XO t1) :: ((XO s) :: []))) :: (((XI t') :: ((XO t1) :: ((XO
      x) :: []))) :: (((XI t1) :: ((XO t') :: [])) :: (((XI t1) :: ((XI
      x) :: [])) :: (((XI s) :: ((XI x) :: ((XO t') :: []))) :: []))))
  | None ->
    ((XI t') :: ((XO s) :: [])) :: (((XI t') :: ((XO x) :: [])) :: (((XI
      s) :: ((XI x) :: ((XO t') :: []))) :: []))

(** val first : variable -> variable -> variable -> clause list **)

let first s x s' =
  ((XI s) :: ((XO s') :: [])) :: (((XI x) :: ((XO s') :: [])) :: (((XI
    s') :: ((XO s) :: ((XO x) :: []))) :: []))

(** val two_of_many :
    variable -> variable option -> variable list -> variable -> formula **)

let rec two_of_many s t0 e next =
  match e with
  | [] -> ([], next)
  | x :: rest ->
    (match rest with
     | [] ->
       ((app (second s t0 x next) (((XO next) :: []) :: [])), (Pos.succ next))
     | _ :: _ ->
       let t' = Pos.succ next in
       let more = two_of_many next (Some t') rest (Pos.succ t') in
       ((app (app (first s x next) (second s t0 x t')) (fst more)),
       (snd more)))

(** val most_direct_degree : nat **)

let most_direct_degree =
  S (S (S (S (S (S O)))))

(** val exactly_two : variable list -> variable -> formula option **)

let exactly_two e next =
  match e with
  | [] -> None
  | x :: rest ->
    (match rest with
     | [] -> None
     | _ :: _ ->
       Some
         (if Nat.leb (length e) most_direct_degree
          then ((two_of_few e), next)
          else two_of_many x None rest next))

(** val take0 : positive -> 'a1 list -> 'a1 list **)

let rec take0 k = function
| [] -> []
| d :: rest -> d :: (if Pos.eqb k XH then [] else take0 (Pos.pred k) rest)

(** val no_later :
    clause -> (variable * variable) list -> variable -> formula **)

let rec no_later before places next =
  match places with
  | [] -> ([], next)
  | p :: rest ->
    let (x, y) = p in
    (match rest with
     | [] -> (((app before ((XI x) :: ((XO y) :: []))) :: []), next)
     | _ :: _ ->
       let more = no_later ((XI next) :: []) rest (Pos.succ next) in
       ((app
          ((app before ((XI x) :: ((XO y) :: []))) :: ((app before ((XI
                                                         x) :: ((XO
                                                         next) :: []))) :: (
          (app before ((XO y) :: ((XO next) :: []))) :: []))) (fst more)),
       (snd more)))

type mirror = { forth : vertex PositiveMap.t; back : vertex PositiveMap.t }

(** val read_mirror : vertex list -> mirror **)

let read_mirror image =
  { forth = (by_place XH image); back =
    (fold_right (fun e -> PositiveMap.add (snd e) (fst e)) PositiveMap.empty
      (number1 XH image)) }

(** val apply : vertex PositiveMap.t -> vertex -> vertex **)

let apply m v =
  match PositiveMap.find v m with
  | Some w -> w
  | None -> v

(** val is_needed1 : question -> vertex -> vertex -> bool **)

let is_needed1 q u v =
  existsb (pair_eqb (u, v)) q.needed

(** val permutes : question -> mirror -> bool **)

let permutes q p =
  forallb (fun v ->
    let w = apply p.forth v in
    (&&) (Pos.leb w (last_vertex q)) (Pos.eqb (apply p.back w) v))
    (count_up0 q.order XH)

(** val keeps_needed : question -> mirror -> bool **)

let keeps_needed q p =
  forallb (fun pat ->
    let (u, v) = pat in
    let x = apply p.back u in
    let y = apply p.back v in
    (&&)
      ((&&) ((||) (is_needed1 q x y) (is_needed1 q y x))
        (Pos.eqb (apply p.forth x) u)) (Pos.eqb (apply p.forth y) v)) q.needed

(** val image_of0 :
    neighbourhoods -> mirror -> (vertex * vertex) -> variable option **)

let image_of0 near p e =
  variable_of near (apply p.forth (fst e)) (apply p.forth (snd e))

(** val keeps_edges : question -> neighbourhoods -> mirror -> bool **)

let keeps_edges q near p =
  forallb (fun e ->
    match image_of0 near p e with
    | Some _ -> true
    | None -> false) q.edges

(** val sources :
    neighbourhoods -> mirror -> (variable * (vertex * vertex)) list ->
    variable PositiveMap.t **)

let sources near p l =
  fold_right (fun pat m ->
    let (i, e) = pat in
    (match image_of0 near p e with
     | Some j -> PositiveMap.add j i m
     | None -> m)) PositiveMap.empty l

(** val moved :
    variable PositiveMap.t -> (variable * (vertex * vertex)) list ->
    (variable * variable) list option **)

let rec moved source = function
| [] -> Some []
| p :: rest ->
  let (x, _) = p in
  (match PositiveMap.find x source with
   | Some y ->
     (match moved source rest with
      | Some places -> Some (if Pos.eqb x y then places else (x, y) :: places)
      | None -> None)
   | None -> None)

(** val mirror_fine : question -> neighbourhoods -> mirror -> bool **)

let mirror_fine q near p =
  (&&) ((&&) (permutes q p) (keeps_edges q near p)) (keeps_needed q p)

(** val mirror_clauses :
    question -> neighbourhoods -> positive -> vertex list -> variable ->
    formula option **)

let mirror_clauses q near k image next =
  let p = read_mirror image in
  if (&&) (Nat.eqb (length image) q.order) (mirror_fine q near p)
  then option_map (fun places -> no_later [] (take0 k places) next)
         (moved (sources near p (numbered_edges q)) (numbered_edges q))
  else None

type fact =
| Degree of vertex
| Cut of vertex list
| Required of vertex * vertex
| Mirror of positive * vertex list

type clauses = { facts : fact list; steps : step list }

(** val cut_fine0 : question -> vertex list -> bool **)

let cut_fine0 q s =
  (&&) ((&&) (vertex_set (last_vertex q) s) (Nat.leb (S O) (length s)))
    (Nat.ltb (length s) q.order)

(** val cut_clause : question -> vertex list -> clause **)

let cut_clause q s =
  let inside = members s in
  map (fun e -> XO (fst e))
    (filter (fun e -> leaves (fun v -> PositiveMap.mem v inside) (snd e))
      (numbered_edges q))

(** val fact_clauses :
    question -> neighbourhoods -> fact -> variable -> formula option **)

let fact_clauses q near f next =
  match f with
  | Degree v -> exactly_two (map snd (around near v)) next
  | Cut s ->
    if cut_fine0 q s then Some (((cut_clause q s) :: []), next) else None
  | Required (u, v) ->
    if is_needed1 q u v
    then option_map (fun x -> ((((XO x) :: []) :: []), next))
           (variable_of near u v)
    else None
  | Mirror (k, image) -> mirror_clauses q near k image next

(** val all_clauses :
    question -> neighbourhoods -> fact list -> variable -> formula option **)

let rec all_clauses q near l next =
  match l with
  | [] -> Some ([], next)
  | f :: rest ->
    (match fact_clauses q near f next with
     | Some f0 ->
       let (some, free) = f0 in
       option_map (fun more -> ((app some (fst more)), (snd more)))
         (all_clauses q near rest free)
     | None -> None)

(** val comes_before : fact -> fact -> bool **)

let comes_before f g =
  match f with
  | Degree u -> (match g with
                 | Degree v -> Pos.ltb u v
                 | _ -> true)
  | Cut _ -> (match g with
              | Degree _ -> false
              | _ -> true)
  | Required (u, v) ->
    (match g with
     | Required (x, y) -> pair_ltb (u, v) (x, y)
     | Mirror (_, _) -> true
     | _ -> false)
  | Mirror (_, _) -> (match g with
                      | Mirror (_, _) -> true
                      | _ -> false)

(** val facts_sorted : fact list -> bool **)

let rec facts_sorted = function
| [] -> true
| f :: rest ->
  (match rest with
   | [] -> true
   | g :: _ -> (&&) (comes_before f g) (facts_sorted rest))

(** val clauses_of :
    question -> neighbourhoods -> fact list -> formula option **)

let clauses_of q near l =
  if facts_sorted l then all_clauses q near l (first_free q) else None

(** val check_clauses : question -> clauses -> bool **)

let check_clauses q proof =
  if Nat.leb (S (S (S O))) q.order
  then (match clauses_of q (near_edges q) proof.facts with
        | Some f -> let (given, _) = f in check_proof given proof.steps
        | None -> false)
  else false

type certificate =
| ByWitness of vertex list
| ByAbsence
| ByObstruction0 of obstruction
| ByCounting0 of counting
| ByCases of cases
| BySweep of vertex list
| ByClauses of clauses

(** val check_question : question -> certificate -> bool **)

let check_question q = function
| ByObstruction0 evidence -> check_obstruction q evidence
| ByCounting0 evidence -> check_counting q evidence
| ByCases evidence -> check_cases q evidence
| BySweep order0 -> check_sweep q order0
| ByClauses evidence -> check_clauses q evidence
| _ -> false

(** val refutes : outcome -> certificate -> bool **)

let refutes o c =
  match o with
  | Missing -> (match c with
                | ByAbsence -> true
                | _ -> false)
  | Asks q -> if well_formed q then check_question q c else false
  | _ -> false

(** val check_path0 :
    'a1 named -> 'a1 query -> bool -> certificate -> bool **)

let check_path0 named0 q answer c =
  if answer
  then (match c with
        | ByWitness order0 -> check_path named0 q order0
        | _ -> false)
  else refutes (normal_path named0 q) c

(** val check_cycle0 :
    'a1 named -> 'a1 query -> bool -> certificate -> bool **)

let check_cycle0 named0 q answer c =
  if answer
  then (match c with
        | ByWitness order0 -> check_cycle named0 q order0
        | _ -> false)
  else refutes (normal_cycle named0 q) c

(** val asked :
    z -> (z * z) list -> z list -> (z * z) list -> (z * z) list -> z query **)

let asked n edges0 ends0 required0 forbidden0 =
  demand (edge_graph n edges0) ends0 required0 forbidden0

(** val shows_path :
    z -> (z * z) list -> z list -> (z * z) list -> (z * z) list -> bool ->
    certificate -> bool **)

let shows_path n edges0 ends0 required0 forbidden0 answer c =
  check_path0 named_number (asked n edges0 ends0 required0 forbidden0) answer
    c

(** val shows_cycle :
    z -> (z * z) list -> (z * z) list -> (z * z) list -> bool -> certificate
    -> bool **)

let shows_cycle n edges0 required0 forbidden0 answer c =
  check_cycle0 named_number (asked n edges0 [] required0 forbidden0) answer c
